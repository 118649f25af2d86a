import { Button } from '~/components/ui/Button';
import { LimitBar } from '~/components/ui/LimitBar';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { formatAtMeter, formatFrequency, formatNumber, formatValue } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { pointLabel } from '~/domain/bench/judge-run';
import { limitBar } from '~/domain/bench/limit-bar';
import { needOf, splitValue, uncertaintyText } from './run-sheet';
import type { Point } from './run-sheet';
import type { Unread } from './use-cells';

interface Props {
  point: Point;
  judgement: PointJudgement;
  /** What was typed and not taken, or refused by the server. */
  unread: Unread | undefined;
  refused: string | undefined;
  onConfirm: () => void;
}

const verdictWords = { pass: 'Pass', too_close: '', fail: 'Fail', not_run: '' } as const;

/** The reading in hand, to be read from a metre away. */
export function ReadingInHand({ point, judgement, unread, refused, onConfirm }: Props) {
  const { quantity } = point;
  const { value } = judgement;
  const split = value === null ? null : splitValue(value, quantity);
  const bar = limitBar(judgement, quantity.unit);
  const uncertainty = uncertaintyText(judgement, quantity);
  return (
    <section className="sheet bench-hand" aria-label="The reading in hand" aria-live="polite">
      <p className="quiet">
        {pointLabel(point)}
        {point.freqHz !== null && ` at ${formatFrequency(point.freqHz)}`}
      </p>
      <p className="font-mono text-reading font-bold tracking-tight whitespace-nowrap">
        {split === null ? '—' : `${judgement.atMost ? '≤' : ''}${split.figure}`}
      </p>
      <p className="min-h-5 font-mono text-quiet text-ink-2">
        {[split?.unit, uncertainty].filter((text) => text !== undefined && text !== '').join(', ')}
      </p>
      {bar !== null && (
        <div className="mt-3">
          <LimitBar
            bar={bar}
            verdict={judgement.verdict}
            quantity={quantity}
            label={`${value === null ? '' : formatValue(value, quantity)}, ${uncertainty}, ${needOf(point, judgement)}: ${judgement.marginText}`}
          />
        </div>
      )}
      <p className="mt-2 text-lg">
        <VerdictMark verdict={judgement.verdict} size="l" word={verdictSentence(judgement)} />
      </p>
      {judgement.stopped !== null && <p className="mt-1">{judgement.stopped}</p>}
      {judgement.pConform !== null && judgement.verdict !== 'not_run' && (
        <p className="quiet">Probability of conformance {formatNumber(judgement.pConform * 100, 1)} %</p>
      )}
      {judgement.atMeter !== null && quantity.path !== 'none' && (
        <p className="quiet">{formatAtMeter(judgement.atMeter, quantity)} at the meter</p>
      )}
      <p className="quiet">
        {judgement.ruleText ??
          (point.limitRule === 'spurious' ? 'Emission rule of the destination' : 'Test plan')}
        {point.decision === 'guarded' || point.limitRule === 'spurious'
          ? ' · guarded, w = U'
          : ' · simple, w = 0'}
      </p>
      {(unread !== undefined || refused !== undefined) && (
        <div className="mt-3 border-l-4 border-stop bg-stop-wash px-3 py-2" role="alert">
          <p className="font-semibold">{unread?.reason ?? refused}</p>
          {unread?.ask === true ? (
            <p className="mt-1">
              <Button kind="outlined" type="button" onClick={onConfirm}>
                Yes, “{unread.text}” is meant
              </Button>
            </p>
          ) : (
            <p className="quiet">Type it again, or press Escape to leave it as it was.</p>
          )}
        </div>
      )}
    </section>
  );
}

function verdictSentence({ verdict, marginText, n }: PointJudgement): string {
  if (n === 0) return 'Not run';
  const word = verdictWords[verdict];
  if (word === '') return marginText.charAt(0).toUpperCase() + marginText.slice(1);
  return `${word}, ${marginText}`;
}
