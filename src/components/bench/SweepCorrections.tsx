import { Checkbox } from '~/components/ui/Checkbox';
import { Field } from '~/components/ui/Field';
import { Select } from '~/components/ui/Select';
import type { SweepLookAnswer } from '~/schemas/bench-sweeps';
import { asBandLabel } from './run-sheet';
import type { Equipment } from './run-sheet';
import type { PendingSweep, SweepFields } from './use-sweep-looks';

interface Props {
  sweep: PendingSweep;
  look: SweepLookAnswer;
  /** Bands of the run's test plan. */
  bands: readonly string[];
  equipment: Equipment;
  onCorrect: (fields: Partial<SweepFields>) => void;
}

const levelUnits = ['dBm', 'dBµV', 'dBmV', 'dBV', 'W', 'mW', 'V'];
const freqUnits = ['Hz', 'kHz', 'MHz', 'GHz'];
const detectors = [
  { value: 'positive peak', label: 'peak' },
  { value: 'sample', label: 'sample' },
  { value: 'average', label: 'average' },
  { value: 'negative peak', label: 'negative peak' },
];
/** Questions that the columns of the file answer. */
const tableQuestions: readonly SweepLookAnswer['questions'][number]['about'][] = [
  'trace',
  'level unit',
  'frequency unit',
];
const plain = (values: readonly string[]) => values.map((value) => ({ value, label: value }));

/** What was understood of a file, each part of it to be corrected. */
export function SweepCorrections({ sweep, look, bands, equipment, onCorrect }: Props) {
  const { fields } = sweep;
  const { understood, questions } = look;
  const columns = understood.columns.map((name, index) => ({ value: String(index), label: name }));
  const asked = (about: (typeof questions)[number]['about']): string | undefined =>
    questions.find((question) => question.about === about)?.text;
  const select = (name: keyof SweepFields) => ({
    name,
    id: `sweep-${sweep.id}-${name}`,
    onChange: (event: { currentTarget: { value: string } }) =>
      onCorrect({ [name]: event.currentTarget.value }),
  });
  const isAskedAboutTable = questions.some(({ about }) => tableQuestions.includes(about));
  const confirmable = questions.some(({ needsValue }) => !needsValue);
  return (
    <fieldset className="grid gap-3 sm:grid-cols-2 lg:grid-cols-3">
      <legend className="sr-only">What was understood</legend>
      <Select
        {...select('band')}
        label="Band"
        value={fields.band}
        placeholder={look.band === null ? 'none fits' : `${asBandLabel(look.band)}, by its carrier`}
        options={bands.map((band) => ({ value: band, label: asBandLabel(band) }))}
      />
      <Field
        key={`${sweep.id} ${fields.rbwKhz}`}
        name="rbwKhz"
        id={`sweep-${sweep.id}-rbwKhz`}
        label="Resolution bandwidth"
        unit="kHz"
        inputMode="decimal"
        mono
        defaultValue={fields.rbwKhz}
        placeholder={understood.rbwHz === null ? '' : String(understood.rbwHz / 1e3)}
        error={asked('bandwidth')}
        onBlur={(event) => {
          const rbwKhz = event.currentTarget.value.trim();
          if (rbwKhz !== fields.rbwKhz) onCorrect({ rbwKhz });
        }}
        onKeyDown={(event) => {
          if (event.key === 'Enter') event.currentTarget.blur();
        }}
      />
      <Select
        {...select('detector')}
        label="Detector"
        value={fields.detector}
        placeholder={understood.detector ?? 'not said'}
        options={detectors}
        error={asked('detector')}
      />
      <Select
        {...select('instrumentRevisionId')}
        label="Instrument"
        value={fields.instrumentRevisionId}
        placeholder="none chosen"
        options={equipment.instruments.map(({ revisionId, number, name }) => ({
          value: String(revisionId),
          label: `${number} · ${name}`,
        }))}
      />
      <Select
        {...select('pathRevisionId')}
        label="Path"
        value={fields.pathRevisionId}
        placeholder="straight in"
        options={equipment.paths
          .filter(({ spec }) => spec.direction === 'to_instrument')
          .map(({ revisionId, number, name }) => ({
            value: String(revisionId),
            label: `${number} · ${name}`,
          }))}
      />
      <details className="sm:col-span-2 lg:col-span-3" open={isAskedAboutTable}>
        <summary className="font-semibold">Columns and units, as they were understood</summary>
        <div className="grid gap-3 pt-2 sm:grid-cols-2 lg:grid-cols-4">
          <Select
            {...select('levelColumn')}
            label="Level"
            value={fields.levelColumn}
            placeholder={columns[understood.levelColumn ?? -1]?.label ?? understood.form}
            options={columns.filter(({ value }) => value !== String(understood.freqColumn))}
            error={asked('trace')}
          />
          <Select
            {...select('levelUnit')}
            label="Unit of the level"
            value={fields.levelUnit}
            placeholder={understood.units.level ?? 'not said'}
            options={plain(levelUnits)}
            error={asked('level unit')}
          />
          <Select
            {...select('freqColumn')}
            label="Frequency"
            value={fields.freqColumn}
            placeholder={columns[understood.freqColumn ?? -1]?.label ?? understood.form}
            options={columns}
          />
          <Select
            {...select('freqUnit')}
            label="Unit of the frequency"
            value={fields.freqUnit}
            placeholder={understood.units.freq}
            options={plain(freqUnits)}
            error={asked('frequency unit')}
          />
        </div>
      </details>
      <div className="sm:col-span-2 lg:col-span-3">
        {confirmable && (
          <Checkbox
            name="understood"
            id={`sweep-${sweep.id}-understood`}
            label="What was understood is right"
            checked={fields.understood === 'yes'}
            error={fields.understood === 'yes' ? undefined : asked('carriers')}
            onChange={(event) => onCorrect({ understood: event.currentTarget.checked ? 'yes' : '' })}
          />
        )}
        <Checkbox
          name="attenuationHeld"
          id={`sweep-${sweep.id}-attenuationHeld`}
          label="The ratios held with 10 dB more attenuation"
          hint="Then no distortion of the analyser’s own is among them."
          checked={fields.attenuationHeld === 'yes'}
          onChange={(event) => onCorrect({ attenuationHeld: event.currentTarget.checked ? 'yes' : '' })}
        />
      </div>
    </fieldset>
  );
}
