import { useEffect, useRef } from 'react';
import { Button } from '~/components/ui/Button';
import { Notice } from '~/components/ui/Notice';
import { referenceBandwidthHz } from '~/domain/bench/limit-rules';
import { formatFrequency, formatNumber } from '~/domain/bench/format';
import { ordinal } from '~/domain/bench/plan-products';
import type { SweepLookAnswer } from '~/schemas/bench-sweeps';
import { asBandLabel } from './run-sheet';
import type { Equipment } from './run-sheet';
import { SweepCorrections } from './SweepCorrections';
import type { LimitAt } from './sweep-limits';
import { SweepPlot } from './SweepPlot';
import { SweepTable } from './SweepTable';
import { isAcceptable, openQuestions } from './use-sweep-looks';
import type { PendingSweep, SweepFields } from './use-sweep-looks';

interface Props {
  sweep: PendingSweep;
  bands: readonly string[];
  equipment: Equipment;
  limitAt: LimitAt;
  onCorrect: (fields: Partial<SweepFields>) => void;
  onAccept: () => void;
  onLeave: () => void;
}

/** A file that is looked at: plotted, corrected, and accepted or left. Nothing of it is kept before. */
export function SweepLook({ sweep, bands, equipment, limitAt, onCorrect, onAccept, onLeave }: Props) {
  const { file, look, error, isBusy } = sweep;
  const heading = useRef<HTMLHeadingElement>(null);
  // Whoever opened the file by the keyboard goes on from here.
  useEffect(() => heading.current?.focus(), [sweep.id]);
  return (
    <section className="grid gap-4" aria-labelledby={`sweep-${sweep.id}`}>
      <h2 id={`sweep-${sweep.id}`} ref={heading} tabIndex={-1}>
        {file.name}: not kept yet
      </h2>
      {isBusy && <p role="status">Reading {file.name}.</p>}
      {error !== null && (
        <Notice tone="stop" title="Nothing was kept">
          {error}
        </Notice>
      )}
      {look !== null && (
        <>
          {look.refusal !== null && (
            <Notice tone="stop" title="It can be looked at, not accepted">
              {look.refusal}
            </Notice>
          )}
          <SweepPlot
            title={look.band === null ? 'Sweep, no band of this run' : `Sweep, ${asBandLabel(look.band)}`}
            facts={factsOf(look)}
            sweep={look}
            limitAt={limitAt}
          />
          <SweepCorrections {...{ sweep, look, bands, equipment, onCorrect }} />
          {look.notes.length > 0 && (
            <ul className="quiet grid gap-1">
              {look.notes.map((note) => (
                <li key={note}>{note}</li>
              ))}
            </ul>
          )}
          <OverWithoutPoint look={look} limitAt={limitAt} />
          {look.readings.length > 0 && <WouldWrite look={look} limitAt={limitAt} />}
          {look.analysis !== null && (
            <details>
              <summary className="font-semibold">The sweep as a table</summary>
              <SweepTable analysis={look.analysis} limitAt={limitAt} />
            </details>
          )}
        </>
      )}
      <p className="flex flex-wrap items-center gap-3">
        {look !== null && look.refusal === null && (
          <Button
            kind="outlined"
            type="button"
            busy={isBusy}
            disabledReason={against(sweep)}
            onClick={onAccept}
          >
            {acceptText(look)}
          </Button>
        )}
        <Button kind="link" type="button" onClick={onLeave}>
          Leave {file.name}
        </Button>
      </p>
    </section>
  );
}

function factsOf({ understood }: SweepLookAnswer): string {
  const [lowHz, highHz] = understood.spanHz;
  return [
    `${understood.points.toLocaleString('en')} points`,
    `${formatFrequency(lowHz)} to ${formatFrequency(highHz)}`,
    understood.rbwHz === null ? 'RBW not known' : `RBW ${formatFrequency(understood.rbwHz)}`,
    referenceText(highHz),
    ...(understood.stepHz === null ? [] : [`points ${formatFrequency(understood.stepHz)} apart`]),
  ].join(' · ');
}

/** What products are stated in by the Radio Regulations, beside what the file was swept with. */
function referenceText(highHz: number): string {
  const below = formatFrequency(referenceBandwidthHz(1e6));
  const above = formatFrequency(referenceBandwidthHz(100e6));
  const parts = highHz > 30e6 ? `${below} to 30 MHz, ${above} above` : `${below} to 30 MHz`;
  return `reference bandwidth ${parts} (from memory)`;
}

function acceptText({ readings }: SweepLookAnswer): string {
  return readings.length === 1 ? 'Accept one reading' : `Accept ${readings.length} readings`;
}

/** Why it cannot be accepted now. */
function against(sweep: PendingSweep): string | undefined {
  if (isAcceptable(sweep) || sweep.isBusy) return undefined;
  const open = openQuestions(sweep);
  if (open.length > 0)
    return open.length === 1 ? 'One question is open.' : `${open.length} questions are open.`;
  return 'The test plan has no point that it could fill.';
}

/** Products over their limit that the test plan has no point for: nothing would be written down of them. */
function OverWithoutPoint({ look, limitAt }: { look: SweepLookAnswer; limitAt: LimitAt }) {
  const written = new Set(look.readings.map(({ meterDbc }) => meterDbc));
  const products = [
    ...(look.analysis?.harmonics ?? [])
      .filter(({ atMost }) => !atMost)
      .map((each) => ({ ...each, name: `${ordinal(each.order)} harmonic` })),
    ...(look.analysis?.others ?? []),
  ];
  const over = products.filter(({ freqHz, unitDbc, meterDbc }) => {
    const limit = limitAt(freqHz);
    return limit !== null && unitDbc > limit && !written.has(meterDbc);
  });
  if (over.length === 0 || look.refusal !== null) return null;
  return (
    <Notice tone="warn" title="Over the limit, and the test plan has no point for it">
      {over
        .map(
          ({ name, freqHz, unitDbc }) =>
            `${name} at ${formatFrequency(freqHz)}: ${formatNumber(unitDbc, 1)} dBc`,
        )
        .join('; ')}
      . The unit does not meet the rule, whatever the run says.
    </Notice>
  );
}

function WouldWrite({ look, limitAt }: { look: SweepLookAnswer; limitAt: LimitAt }) {
  return (
    <div className="table-frame" role="region" aria-label="What would be written down" tabIndex={0}>
      <table className="table">
        <caption className="mb-1 text-left font-semibold">What would be written down</caption>
        <thead>
          <tr>
            <th scope="col">Point</th>
            <th scope="col">Product</th>
            {['Frequency', 'At the meter', 'At the unit', 'Under the limit'].map((label) => (
              <th key={label} scope="col" className="num">
                {label}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {look.readings.map(({ testPointId, label, name, freqHz, meterDbc, unitDbc, atMost }) => {
            const productHz = name === null ? harmonicHz(look, meterDbc) : freqHz;
            const limit = productHz === null ? null : limitAt(productHz);
            return (
              <tr key={`${testPointId} ${freqHz ?? ''}`}>
                <th scope="row">{label}</th>
                <td>{name ?? ''}</td>
                <td className="num">{productHz === null ? '' : formatFrequency(productHz)}</td>
                <td className="num">
                  {atMost ? '≤ ' : ''}
                  {formatNumber(meterDbc, 1)} dBc
                </td>
                <td className="num">
                  {atMost ? '≤ ' : ''}
                  {formatNumber(unitDbc, 1)} dBc
                </td>
                <td className={`num ${limit !== null && unitDbc > limit ? 'text-stop' : ''}`}>
                  {limit === null ? '' : underText(limit - unitDbc)}
                </td>
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

/** Where a harmonic stands: its reading carries the test frequency. */
function harmonicHz({ analysis }: SweepLookAnswer, meterDbc: number): number | null {
  return analysis?.harmonics.find((each) => each.meterDbc === meterDbc)?.freqHz ?? null;
}

function underText(db: number): string {
  return db >= 0 ? `${formatNumber(db, 1)} dB` : `${formatNumber(-db, 1)} dB over`;
}
