import { useState } from 'react';
import { Field } from '~/components/ui/Field';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { formatValue } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { pointLabel } from '~/domain/bench/judge-run';
import type { Station } from '~/schemas/bench-station';
import { AskDialog } from './AskDialog';
import { columnUnitOf, needOf, uncertaintyText, unitHint } from './run-sheet';
import type { Equipment, Point } from './run-sheet';
import { scratchReading } from './scratch';
import type { Chosen } from './use-equipment';

interface Props {
  station: Station;
  equipment: Equipment;
  point: Point;
  chosen: Chosen;
  onLeave: () => void;
}

/** Readings while something is being tuned: read and judged as any, sent nowhere, gone when the panel closes. */
export function ScratchPanel({ station, equipment, point, chosen, onLeave }: Props) {
  const [text, setText] = useState('');
  const [taken, setTaken] = useState<{ text: string; judgement: PointJudgement }[]>([]);
  const [refused, setRefused] = useState<{ text: string; reason: string; ask: boolean } | null>(null);
  const { quantity } = point;

  const take = (): void => {
    const entered = text.trim();
    if (entered === '') return;
    const result = scratchReading(station, equipment, point, {
      ...chosen,
      text: entered,
      columnUnit: columnUnitOf(station.sheet.readings, quantity),
      confirmed: refused?.ask === true && refused.text === entered,
    });
    if (!result.ok) {
      setRefused({ text: entered, ...result });
      return;
    }
    setTaken([result, ...taken]);
    setRefused(null);
    setText('');
  };
  const error =
    refused === null ? undefined : `${refused.reason}${refused.ask ? ' Take it again if it is.' : ''}`;
  const [newest] = taken;
  return (
    <AskDialog
      title={`Scratch, ${pointLabel(point)}`}
      action="Take it"
      leaveText="Close scratch"
      onAct={take}
      onLeave={onLeave}
    >
      <p className="border-l-4 border-rule pl-3">
        <strong className="font-semibold">Scratch:</strong> belongs to no run and decides nothing. It is gone
        when this closes.
      </p>
      <Field
        name="scratch"
        label="What the instrument shows"
        hint={[unitHint(quantity), needOf(point, newest?.judgement)].join(' · ')}
        mono
        autoFocus
        autoComplete="off"
        autoCapitalize="off"
        spellCheck={false}
        maxLength={60}
        value={text}
        error={error}
        onChange={(event) => setText(event.currentTarget.value)}
      />
      <div aria-live="polite">
        {taken.length > 0 && (
          <ol
            reversed
            className="grid max-h-72 list-none gap-2 overflow-y-auto"
            aria-label="Scratch readings"
          >
            {taken.map(({ text: entered, judgement }, index) => (
              <li
                key={taken.length - index}
                className="grid grid-cols-[1fr_auto] items-baseline gap-x-4 border-t border-rule pt-2"
              >
                <span className={`font-mono font-semibold ${index === 0 ? 'text-lg' : ''}`}>
                  {judgement.value === null ? '—' : formatValue(judgement.value, quantity)}
                </span>
                <VerdictMark verdict={judgement.verdict} word={`would be: ${wouldBe(judgement)}`} />
                <span className="quiet col-span-2">
                  {[`“${entered}”`, uncertaintyText(judgement, quantity), judgement.stopped ?? '']
                    .filter((part) => part !== '')
                    .join(' · ')}
                </span>
              </li>
            ))}
          </ol>
        )}
      </div>
    </AskDialog>
  );
}

function wouldBe({ verdict, marginText }: PointJudgement): string {
  if (verdict === 'pass') return `pass, ${marginText}`;
  return verdict === 'fail' ? `fail, ${marginText}` : marginText;
}
