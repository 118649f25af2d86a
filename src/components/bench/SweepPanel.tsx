import { useEffect, useRef, useState } from 'react';
import type { RefObject } from 'react';
import { Button } from '~/components/ui/Button';
import { Notice } from '~/components/ui/Notice';
import { formatFrequency } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import type { Station, StationSweep } from '~/schemas/bench-station';
import { asBandLabel } from './run-sheet';
import type { Equipment } from './run-sheet';
import { limitsOn } from './sweep-limits';
import { SweepLook } from './SweepLook';
import { SweepPlot } from './SweepPlot';
import { SweepTable } from './SweepTable';
import type { Chosen } from './use-equipment';
import { isAcceptable, useSweepLooks } from './use-sweep-looks';
import type { PendingSweep } from './use-sweep-looks';

interface Props {
  station: Station;
  judgements: ReadonlyMap<number, PointJudgement>;
  equipment: Equipment;
  /** The band in hand, whose sweep is shown. */
  band: string | null;
  chosen: Chosen;
  editable: boolean;
  /** Opened by the button above the grid. */
  fileInput: RefObject<HTMLInputElement | null>;
  onRead: () => Promise<unknown>;
}

/** Sweeps of the run: dropped or chosen, looked at, accepted, and drawn with what they came to. */
export function SweepPanel(props: Props) {
  const { station, judgements, equipment, band, chosen, editable, fileInput, onRead } = props;
  const looks = useSweepLooks(station.run.id, onRead);
  const [isOver, setIsOver] = useState(false);
  const { pending, shown } = looks;
  const kept = station.sweeps.find((sweep) => sweep.band === band) ?? station.sweeps[0];
  const bands = [...new Set(station.sheet.points.flatMap((point) => point.band ?? []))];
  const ready = pending.filter(isAcceptable);

  const take = (files: FileList | null): void => {
    if (editable && files !== null && files.length > 0) looks.add([...files], chosen);
  };
  return (
    <section
      className={`sheet mt-5 ${isOver ? 'bench-drop' : ''}`}
      aria-label="Sweep"
      onDragOver={(event) => {
        if (!editable) return;
        event.preventDefault();
        setIsOver(true);
      }}
      onDragLeave={() => setIsOver(false)}
      onDrop={(event) => {
        event.preventDefault();
        setIsOver(false);
        take(event.dataTransfer.files);
      }}
    >
      <input
        ref={fileInput}
        type="file"
        multiple
        className="sr-only"
        tabIndex={-1}
        aria-label="Sweep files"
        accept=".csv,.txt,.tsv,.dat,.trc,text/*"
        onChange={(event) => {
          take(event.currentTarget.files);
          event.currentTarget.value = '';
        }}
      />
      {shown === undefined && looks.said !== null && <Said text={looks.said} />}
      {pending.length > 1 && (
        <div className="mb-4 flex flex-wrap items-center gap-3">
          <Waiting pending={pending} shownId={shown?.id} onShow={looks.show} />
          {ready.length > 1 && (
            <Button kind="outlined" type="button" onClick={() => void looks.accept(ready)}>
              Accept all {ready.length}
            </Button>
          )}
        </div>
      )}
      {shown !== undefined && (
        <SweepLook
          key={shown.id}
          sweep={shown}
          {...{ bands, equipment }}
          limitAt={limitsOn(shown.look?.band ?? null, station, judgements)}
          onCorrect={(fields) => looks.correct(shown.id, fields)}
          onAccept={() => void looks.accept([shown])}
          onLeave={() => looks.leave(shown.id)}
        />
      )}
      {shown === undefined && kept === undefined && (
        <p className="text-ink-2">
          {editable
            ? 'No sweep yet. Drop spectrum files here, one a band, or load them above: each is shown before anything is kept.'
            : 'No sweep was read into this run.'}
        </p>
      )}
      {shown === undefined && kept !== undefined && <KeptSweep sweep={kept} {...{ station, judgements }} />}
    </section>
  );
}

/** Says what was written down, and keeps the keyboard where the file was accepted. */
function Said({ text }: { text: string }) {
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => box.current?.focus(), [text]);
  return (
    <div ref={box} tabIndex={-1} className="mb-4">
      <Notice tone="ok" title="Written down">
        {text}
      </Notice>
    </div>
  );
}

/** Files that wait, each with the band it was told to be of. */
function Waiting({
  pending,
  shownId,
  onShow,
}: {
  pending: readonly PendingSweep[];
  shownId: number | undefined;
  onShow: (id: number) => void;
}) {
  return (
    <ul className="flex flex-wrap gap-x-4" aria-label="Files that wait">
      {pending.map((each) => (
        <li key={each.id}>
          <button
            type="button"
            aria-current={each.id === shownId ? 'true' : undefined}
            className={`min-h-(--control) border-b-3 px-1 ${each.id === shownId ? 'border-copper font-semibold' : 'border-transparent'}`}
            onClick={() => onShow(each.id)}
          >
            {each.file.name} · {stateOf(each)}
          </button>
        </li>
      ))}
    </ul>
  );
}

function stateOf(sweep: PendingSweep): string {
  if (sweep.isBusy) return 'being read';
  if (sweep.look === null) return 'no sweep';
  if (sweep.look.band === null) return 'no band';
  const band = asBandLabel(sweep.look.band);
  if (sweep.look.refusal !== null) return `${band}, not to be accepted`;
  return isAcceptable(sweep) ? `${band}, ready` : `${band}, asks`;
}

function KeptSweep({
  sweep,
  station,
  judgements,
}: {
  sweep: StationSweep;
  station: Station;
  judgements: ReadonlyMap<number, PointJudgement>;
}) {
  const { understood, analysis, notes } = sweep;
  const limitAt = limitsOn(sweep.band, station, judgements);
  const facts = [
    sweep.fileName,
    understood.rbwHz === null ? 'RBW not known' : `RBW ${formatFrequency(understood.rbwHz)}`,
    `${understood.points.toLocaleString('en')} points`,
  ].join(' · ');
  return (
    <>
      <SweepPlot title={`Sweep, ${asBandLabel(sweep.band)}`} {...{ facts, sweep, limitAt }} />
      <details className="mt-2">
        <summary className="font-semibold">The sweep as a table</summary>
        <SweepTable {...{ analysis, limitAt }} />
      </details>
      {notes.map((note) => (
        <p key={note} className="quiet">
          {note}
        </p>
      ))}
    </>
  );
}
