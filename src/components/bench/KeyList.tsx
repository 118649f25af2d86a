import { AskDialog } from './AskDialog';

const keys = [
  ['Enter', 'take the value and go on; Shift Enter goes back'],
  ['↑ ↓ ← →', 'move; left and right at the ends of the text'],
  ['Escape', 'leave the cell as it was'],
  ['Alt R', 'read again: adds a reading, all of them count'],
  ['Alt V', 'void the newest reading of the cell, with a cause'],
  ['Alt B', 'open or shut the uncertainty budget'],
  ['Alt L', 'load a sweep for the band'],
  ['Alt S', 'scratch readings: judged, never kept'],
  ['Alt O', 'go on by quantity or by band'],
  ['Alt C', 'close the run'],
  ['?', 'this list'],
] as const;

/** The keys of the station. */
export function KeyList({ onLeave }: { onLeave: () => void }) {
  return (
    <AskDialog title="Keys" onLeave={onLeave}>
      <dl className="grid grid-cols-[auto_1fr] gap-x-5 gap-y-1">
        {keys.map(([key, what]) => (
          <div key={key} className="contents">
            <dt className="font-mono font-semibold">{key}</dt>
            <dd>{what}</dd>
          </div>
        ))}
      </dl>
    </AskDialog>
  );
}
