import { Button } from '~/components/ui/Button';
import { Checkbox } from '~/components/ui/Checkbox';
import { Select } from '~/components/ui/Select';
import { formatAtMeter, formatNumber } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import type { StationReading } from '~/schemas/bench-station';
import { isRead } from './run-sheet';
import type { Equipment, Point } from './run-sheet';
import type { Chosen } from './use-equipment';

interface Props {
  point: Point;
  judgement: PointJudgement;
  /** All readings of the point, void ones too. */
  readings: readonly StationReading[];
  equipment: Equipment;
  chosen: Chosen;
  editable: boolean;
  /** Stays as it is from cell to cell. */
  isBudgetOpen: boolean;
  onBudget: (isOpen: boolean) => void;
  onChoose: (chosen: Chosen) => void;
  onReadAgain: () => void;
  onVoid: (reading: StationReading) => void;
  onHoldAttenuation: (held: boolean) => void;
}

const gradeWords = { accredited: 'accredited', checked: 'checked', unchecked: 'unchecked' } as const;

/** What the reading in hand was read with, all readings of its point, and its uncertainty budget. */
export function ReadingDetail(props: Props) {
  const { point, judgement, readings, equipment, chosen, editable, onChoose, onReadAgain, onVoid } = props;
  const { quantity } = point;
  const counted = readings.filter(({ voided }) => !voided);
  const isRatio = quantity.unit === 'dBc';
  return (
    <section className="sheet grid gap-4" aria-label="How it is read">
      <Conditions point={point} />
      {editable && isRead(point) && quantity.format !== 'yes_no' && (
        <div className="grid gap-3">
          <Select
            name="instrument"
            label="Instrument"
            placeholder="none chosen"
            value={chosen.instrumentRevisionId ?? ''}
            onChange={(event) =>
              onChoose({ ...chosen, instrumentRevisionId: idOf(event.currentTarget.value) })
            }
            options={equipment.instruments.map(({ revisionId, number, name, spec }) => ({
              value: String(revisionId),
              label: `${number} · ${name} · ${gradeWords[spec.grade]}`,
            }))}
          />
          {quantity.path !== 'none' && (
            <Select
              name="path"
              label="Path"
              placeholder="straight in"
              value={chosen.pathRevisionId ?? ''}
              onChange={(event) => onChoose({ ...chosen, pathRevisionId: idOf(event.currentTarget.value) })}
              options={equipment.paths.map(({ revisionId, number, name }) => ({
                value: String(revisionId),
                label: `${number} · ${name}`,
              }))}
            />
          )}
          {isRatio && counted.length > 0 && (
            <Checkbox
              name="attenuationHeld"
              label="The ratio holds with 10 dB more attenuation"
              checked={counted.every(({ attenuationHeld }) => attenuationHeld)}
              onChange={(event) => props.onHoldAttenuation(event.currentTarget.checked)}
            />
          )}
        </div>
      )}
      {isRead(point) && (
        <div>
          <h2 className="mb-1">Readings here</h2>
          {readings.length === 0 && <p className="quiet">None yet. Type what the instrument shows.</p>}
          <ul className="grid gap-1">
            {readings.map((reading) => (
              <li key={`${reading.readingNo} ${reading.id}`} className="flex flex-wrap items-center gap-x-3">
                <span className={`font-mono ${reading.voided ? 'line-through' : ''}`}>
                  {formatAtMeter(reading.value, quantity)}
                </span>
                <span className="quiet">
                  {[sourceText(reading), reading.instrumentNumber, reading.pathNumber]
                    .filter((text) => text !== null)
                    .join(' · ')}
                </span>
                {reading.voided && <span className="quiet basis-full">Void: {reading.voidReason}</span>}
                {editable && !reading.voided && reading.id > 0 && (
                  <Button kind="link" type="button" onClick={() => onVoid(reading)}>
                    Void
                  </Button>
                )}
              </li>
            ))}
          </ul>
          {editable && counted.length > 0 && (
            <p className="mt-2">
              <Button kind="outlined" type="button" onClick={onReadAgain} aria-keyshortcuts="Alt+R">
                Read again
              </Button>
            </p>
          )}
        </div>
      )}
      {judgement.uComponents.length > 0 && (
        <Budget judgement={judgement} isOpen={props.isBudgetOpen} onToggle={props.onBudget} />
      )}
    </section>
  );
}

/** What the test plan says of the point besides its limits, and where a computed one comes from. */
function Conditions({ point: { quantity, method, supplyV } }: Pick<Props, 'point'>) {
  if (quantity.formula === null && method === '' && supplyV === null) return null;
  return (
    <dl className="grid gap-2">
      {quantity.formula !== null && (
        <div>
          <dt className="font-semibold">Computed from the readings of its band</dt>
          <dd className="font-mono text-[0.9375rem] break-words">{quantity.formula}</dd>
          <dd className="quiet">Source: {quantity.source}</dd>
        </div>
      )}
      {method !== '' && (
        <div>
          <dt className="font-semibold">How it is read</dt>
          <dd>{method}</dd>
        </div>
      )}
      {supplyV !== null && (
        <div>
          <dt className="font-semibold">Supply for this point</dt>
          <dd className="font-mono">{formatNumber(supplyV, 1)} V</dd>
        </div>
      )}
    </dl>
  );
}

/** What was entered, and how it came here unless somebody typed it. */
function sourceText({ source, enteredText }: StationReading): string {
  if (source === 'sweep') return 'from a sweep';
  const entered = `“${enteredText}”`;
  if (source === 'wire') return `${entered}, from a script`;
  return source === 'history' ? `${entered}, from an old sheet` : entered;
}

interface BudgetProps {
  judgement: PointJudgement;
  isOpen: boolean;
  onToggle: (isOpen: boolean) => void;
}

function Budget({ judgement, isOpen, onToggle }: BudgetProps) {
  const { uComponents, U, k, uUnit } = judgement;
  const decimals = uUnit === 'Hz' ? 1 : uUnit === 'A' ? 4 : 3;
  return (
    <details open={isOpen} onToggle={({ currentTarget }) => onToggle(currentTarget.open)}>
      <summary className="font-semibold" aria-keyshortcuts="Alt+B">
        Uncertainty budget
      </summary>
      <div className="table-frame mt-2" role="region" aria-label="Uncertainty budget" tabIndex={0}>
        <table className="table text-[0.9375rem]">
          <caption className="sr-only">Components of the expanded uncertainty, in {uUnit}</caption>
          <thead>
            <tr>
              <th scope="col">Component</th>
              <th scope="col" className="num">
                ± {uUnit}
              </th>
              <th scope="col" className="num">
                ÷
              </th>
              <th scope="col" className="num">
                u
              </th>
            </tr>
          </thead>
          <tbody>
            {uComponents.map((line, index) => (
              <tr key={index}>
                <td>
                  {line.name} <span className="quiet">{line.distribution}</span>
                </td>
                <td className="num">{formatNumber(line.value, decimals)}</td>
                <td className="num">{formatNumber(line.divisor, 2)}</td>
                <td className="num">{formatNumber(line.u, decimals)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {U !== null && k !== null && (
        <p className="quiet mt-1">
          Combined {formatNumber(U / k, decimals)} {uUnit}, expanded with k = {formatNumber(k, 2)} to{' '}
          {formatNumber(U, decimals)} {uUnit} (95.45 %)
        </p>
      )}
    </details>
  );
}

function idOf(value: string): number | null {
  return value === '' ? null : Number(value);
}
