import { useEffect, useState } from 'react';
import { Checkbox } from '~/components/ui/Checkbox';
import { Notice } from '~/components/ui/Notice';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { smallTransistorCaution } from '~/domain/bench/derived';
import { formatPower } from '~/domain/bench/format';
import { checkPathPower } from '~/domain/bench/paths';
import { resultInWords, verdictOfResult } from '~/domain/bench/run-result';
import { paths } from '~/lib/paths';
import type { Station } from '~/schemas/bench-station';
import type { Equipment } from './run-sheet';

interface Props {
  station: Station;
  equipment: Equipment;
  /** The path that the reading in hand goes through. */
  pathRevisionId: number | null;
}

/** What is checked before the key goes down, and what earlier runs found. */
export function BeforeYouKey({ station, equipment, pathRevisionId }: Props) {
  const { unit, run, earlier } = station;
  const name = `rigwright-run-${run.id}-checklist`;
  const [ticked, setTicked] = useState<readonly string[]>([]);
  useEffect(() => setTicked(sessionStorage.getItem(name)?.split('|') ?? []), [name]);
  const tick = (key: string, isOn: boolean): void => {
    const next = isOn ? [...ticked, key] : ticked.filter((one) => one !== key);
    setTicked(next);
    sessionStorage.setItem(name, next.join('|'));
  };
  const path = equipment.paths.find((each) => each.revisionId === pathRevisionId)?.spec;
  const freqHz = station.sheet.points.find((point) => point.freqHz !== null)?.freqHz ?? 7e6;
  const stands = path === undefined ? null : checkPathPower(path, unit.ratedPowerW, freqHz);
  const stage = station.sheet.context.outputStage;
  const sinkCaution =
    stage === null
      ? null
      : smallTransistorCaution({
          outputWPerDevice: unit.ratedPowerW / stage.devices,
          keyDownMode: stage.duty >= 1,
          hasSink: stage.hasSink,
        });
  const items = [
    ['load', `Dummy load on, rated for ${formatPower(unit.ratedPowerW)} or more, antenna off`],
    ['limit', 'Supply current limit set'],
    ['path', 'Attenuators in the order of the path'],
    ['case', 'Output transistors looked at: they get hot'],
  ] as const;
  return (
    <div className="bench-prep grid content-start gap-5">
      {run.state === 'open' && (
        <section aria-labelledby="before-you-key">
          <h2 id="before-you-key" className="mb-1">
            Before you key
          </h2>
          {stands?.ok === false && (
            <div className="my-2">
              <Notice tone="stop" title="Do not key">
                {stands.reason}
              </Notice>
            </div>
          )}
          {sinkCaution !== null && (
            <div className="my-2">
              <Notice tone="warn" title="No heat sink">
                {sinkCaution} Common practice; the data sheet of the part decides.
              </Notice>
            </div>
          )}
          {items.map(([key, label]) => (
            <Checkbox
              key={key}
              name="checklist"
              value={key}
              label={label}
              checked={ticked.includes(key)}
              onChange={(event) => tick(key, event.currentTarget.checked)}
            />
          ))}
          <ul className="quiet mt-2 grid gap-1">
            <li>
              <strong className="font-semibold text-ink">RF burns.</strong> Keep fingers off the output and
              the tap while it is keyed.
            </li>
            <li>
              <strong className="font-semibold text-ink">Hot parts.</strong> Let heat sinks cool after
              key-down.
            </li>
            <li>
              <strong className="font-semibold text-ink">Mains.</strong> Use an isolated, fused supply on the
              bench.
            </li>
            <li>
              The limits depend on local rules and the licence. The program computes; the licensed operator
              and the local administration decide.
            </li>
          </ul>
        </section>
      )}
      <section aria-labelledby="earlier-runs">
        <h2 id="earlier-runs" className="mb-1">
          Earlier runs
        </h2>
        {earlier.length === 0 && <p className="quiet">None: this is the first.</p>}
        {earlier[0] !== undefined && (
          <p className="mb-2">
            <a
              href={paths.compareRuns(unit.serial, earlier[0].runNo, run.runNo)}
              className="inline-flex min-h-7 items-center"
            >
              Side by side with run {earlier[0].runNo}
            </a>
          </p>
        )}
        <ul className="grid gap-3">
          {earlier.map((before) => (
            <li key={before.runNo}>
              <a href={paths.run(unit.serial, before.runNo)}>
                <VerdictMark
                  verdict={verdictOfResult(before.result)}
                  word={`Run ${before.runNo} ${resultInWords(before.result).toLowerCase()}`}
                />
              </a>
              {before.failed.map((text) => (
                <p key={text} className="leading-snug">
                  {text}
                </p>
              ))}
              <p className="quiet">{before.text}</p>
              {before.rework !== null && <p className="quiet">Rework: {before.rework}</p>}
            </li>
          ))}
        </ul>
      </section>
    </div>
  );
}
