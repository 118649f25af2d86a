import { useMutation } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import type { RefObject } from 'react';
import { Button } from '~/components/ui/Button';
import { Checkbox } from '~/components/ui/Checkbox';
import { Field } from '~/components/ui/Field';
import { Notice } from '~/components/ui/Notice';
import { Select } from '~/components/ui/Select';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { paths } from '~/lib/paths';
import type { Station } from '~/schemas/bench-station';
import { asBandLabel } from './run-sheet';
import { Refused, send } from './send';
import { SweepPlot } from './SweepPlot';
import type { Chosen } from './use-equipment';

interface Props {
  station: Station;
  judgements: ReadonlyMap<number, PointJudgement>;
  /** The band in hand, for which a sweep is loaded. */
  band: string | null;
  chosen: Chosen;
  editable: boolean;
  /** Opened by the button above the grid. */
  fileInput: RefObject<HTMLInputElement | null>;
  onRead: () => Promise<unknown>;
}

const levelUnits = ['dBm', 'dBµV', 'dBmV', 'dBV', 'W', 'mW', 'V'].map((value) => ({ value, label: value }));

/** The sweep of the band in hand: dropped or chosen, asked about, drawn. */
export function SweepPanel({ station, judgements, band, chosen, editable, fileInput, onRead }: Props) {
  const [file, setFile] = useState<File | null>(null);
  const [isOver, setIsOver] = useState(false);
  const form = useRef<HTMLFormElement>(null);
  const shown = station.sweeps.find((sweep) => sweep.band === band) ?? station.sweeps[0];

  const reading = useMutation({
    mutationFn: (body: FormData) => send(paths.api.sweeps(station.run.id), body, crypto.randomUUID()),
    onSuccess: async () => {
      setFile(null);
      if (fileInput.current !== null) fileInput.current.value = '';
      await onRead();
    },
  });

  const read = (sweepFile: File): void => {
    if (band === null || !editable) return;
    setFile(sweepFile);
    const body = form.current === null ? new FormData() : new FormData(form.current);
    body.set('file', sweepFile);
    body.set('band', band);
    body.set('instrumentRevisionId', String(chosen.instrumentRevisionId ?? ''));
    body.set('pathRevisionId', String(chosen.pathRevisionId ?? ''));
    reading.mutate(body);
  };

  const refusal = reading.error instanceof Refused ? reading.error.refusal : null;
  const asked = file !== null && reading.isError;
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
        const [dropped] = event.dataTransfer.files;
        if (dropped !== undefined) read(dropped);
      }}
    >
      <input
        ref={fileInput}
        type="file"
        className="sr-only"
        tabIndex={-1}
        aria-label="Sweep file"
        accept=".csv,.txt,.tsv,.dat,.trc,text/*"
        onChange={(event) => {
          const [picked] = event.currentTarget.files ?? [];
          if (picked !== undefined) read(picked);
        }}
      />
      {reading.isPending && <p role="status">Reading {file?.name}.</p>}
      {asked && (
        <div className="mb-4 grid gap-3">
          <Notice tone="stop" title={`“${file.name}” was not read, and nothing was stored`}>
            {refusal?.detail ?? 'The server did not answer. Try again.'}
          </Notice>
          <form
            ref={form}
            className="grid gap-3 sm:grid-cols-2"
            onSubmit={(event) => {
              event.preventDefault();
              read(file);
            }}
          >
            <Select
              name="levelUnit"
              label="Unit of the level"
              placeholder="as in the file"
              options={levelUnits}
            />
            <Select
              name="freqUnit"
              label="Unit of the frequency"
              placeholder="as in the file"
              options={['Hz', 'kHz', 'MHz', 'GHz'].map((value) => ({ value, label: value }))}
            />
            <Field name="rbwKhz" label="Resolution bandwidth" unit="kHz" inputMode="decimal" mono />
            <Select
              name="detector"
              label="Detector"
              placeholder="as in the file"
              options={[
                { value: 'positive peak', label: 'peak' },
                { value: 'sample', label: 'sample' },
                { value: 'average', label: 'average' },
              ]}
            />
            <Field
              name="levelColumn"
              label="Column of the level"
              hint="Counted from 0, where the file has several traces"
              inputMode="numeric"
              mono
            />
            <Checkbox name="understood" value="yes" label="What was understood is right" />
            <p className="flex flex-wrap gap-3 sm:col-span-2">
              <Button kind="outlined">Read the sweep again</Button>
              <Button
                kind="link"
                type="button"
                onClick={() => {
                  setFile(null);
                  reading.reset();
                }}
              >
                Leave it
              </Button>
            </p>
          </form>
        </div>
      )}
      {shown === undefined ? (
        <p className="text-ink-2">
          {editable
            ? `No sweep yet. Drop a spectrum file here for ${band === null ? 'a band' : asBandLabel(band)}, or load one above: its harmonics fill the row.`
            : 'No sweep was read into this run.'}
        </p>
      ) : (
        <SweepPlot sweep={shown} station={station} judgements={judgements} />
      )}
    </section>
  );
}
