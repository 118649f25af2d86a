import { Notice } from '~/components/ui/Notice';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { resultInWords, verdictOfResult } from '~/domain/bench/run-result';
import type { RunResult } from '~/domain/bench/run-result';
import { AskDialog } from './AskDialog';

interface Props {
  result: RunResult;
  runNo: number;
  busy: boolean;
  error: string | undefined;
  onClose: () => void;
  onLeave: () => void;
}

const follows: Record<RunResult['result'], string> = {
  passed_by_concession:
    'The unit goes on to packing, and its certificate prints the concession with its reason.',
  passed: 'The unit goes on to packing, and its certificate can be issued.',
  undecided: 'The unit is not released. Read more often, measure better, or mend it, and open a new run.',
  failed: 'The unit goes into rework, with these points as its cause.',
  incomplete: '',
};

/** Asks before a run is closed: closed is closed. */
export function CloseDialog({ result, runNo, busy, error, onClose, onLeave }: Props) {
  const word = resultInWords(result.result);
  const isFailed = result.result === 'failed';
  return (
    <AskDialog
      title={`Close run ${runNo} as ${word.toLowerCase()}?`}
      action={isFailed ? 'Close it as failed' : 'Close the run'}
      tone={isFailed ? 'stop' : undefined}
      busy={busy}
      onAct={onClose}
      onLeave={onLeave}
    >
      <p>
        <VerdictMark verdict={verdictOfResult(result.result)} word={word} />
      </p>
      {result.why.length > 0 && (
        <ul className="grid gap-1">
          {result.why.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ul>
      )}
      <p>{follows[result.result]} A closed run does not change.</p>
      {error !== undefined && <Notice tone="stop" title={error} />}
    </AskDialog>
  );
}
