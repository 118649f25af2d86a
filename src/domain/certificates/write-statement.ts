import { bandLabel } from '~/domain/bench/bands';
import { formatAtMeter, formatUncertainty, formatValue } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { isLegal } from '~/domain/bench/judge-run';
import type { Quantity } from '~/domain/bench/quantities';
import type { InstrumentSpec, PathSpec, TestPoint } from '~/domain/bench/types';
import type { CertificateStatement, StatedInstrument, StatedPoint, StatedUncertainty } from './statement';
import { formatDay } from '~/lib/dates';
import { writeConformity, writeNotAssessed } from './write-conformity';
import type { ConformityFacts } from './write-conformity';

/** A judged test point of a closed run. */
export interface JudgedPoint {
  point: TestPoint;
  judgement: PointJudgement;
  /** The owner's reason for letting it go; null where none was needed. */
  concession: string | null;
}

/** Everything that the readings part of a certificate is written from. */
export interface RunFacts extends ConformityFacts {
  /** Of the points, those whose readings were taken over from an old test sheet. */
  historyPointIds: ReadonlySet<number>;
  instruments: readonly { number: string; name: string; spec: InstrumentSpec }[];
  paths: readonly { number: string; name: string; spec: PathSpec }[];
}

type WrittenParts = Pick<
  CertificateStatement,
  'points' | 'instruments' | 'path' | 'decisionRule' | 'conformity' | 'notAssessed' | 'cautions'
>;

const DECISION_RULE =
  'A legal limit is decided with a guard band as wide as the expanded uncertainty (w = U, ILAC-G8:09/2019, 4.2.3); ' +
  'a limit of the works’ own as the test plan says, guarded or simple (w = 0). Too close to call is no pass. ' +
  'The risk that a pass is wrong is under 2.5 % with the guard band, and up to 50 % at the limit itself without one.';

const CAUTIONS = [
  'The results are of this unit alone, as it was tested. This is not a type approval.',
  'Transmitting needs a licence; the limits where you are depend on local rules, and your administration decides.',
  'RF burns, and the output stage and its sink get hot: mind your hands, and use a dummy load rated for the power.',
];

/** Writes what a closed run says, in words and figures; the figures that were judged stand beside the rounded ones. */
export function writeRunParts(facts: RunFacts): WrittenParts {
  return {
    points: facts.points.map((judged) => writePoint(judged, facts.historyPointIds)),
    instruments: facts.instruments.map(writeInstrument),
    path: facts.paths
      .map(({ number, name, spec }) => `${number} ${name}: ${spec.parts.map((part) => part.name).join(', ')}`)
      .join('; '),
    decisionRule: DECISION_RULE,
    conformity: writeConformity(facts),
    notAssessed: writeNotAssessed(facts),
    cautions: CAUTIONS,
  };
}

function writePoint(
  { point, judgement, concession }: JudgedPoint,
  historyPointIds: ReadonlySet<number>,
): StatedPoint {
  const { quantity } = point;
  const { value, atMeter, lower, upper, ruleText, verdict, n, atMost } = judgement;
  if (value === null) throw new Error('A certificate states only what was read.');
  const least = atMost ? '≤ ' : '';
  return {
    label: quantity.label,
    quantityKey: quantity.key,
    band: point.band === null ? null : bandLabel(point.band),
    freqHz: point.freqHz,
    value,
    unit: quantity.unit,
    text: least + formatValue(value, quantity),
    // What is computed from other readings stood on no meter.
    atMeterText: atMeter === null ? '' : least + formatAtMeter(atMeter, quantity),
    uncertainty: writeUncertainty(judgement, quantity),
    n,
    lower,
    upper,
    limitText: statedLimit(quantity, lower, upper),
    ruleText: ruleText ?? 'works’ own',
    decision: isLegal(point) ? 'guarded' : point.decision,
    verdict,
    concession: verdict === 'pass' ? null : concession,
    ...(quantity.formula === null ? {} : { origin: 'computed' as const }),
    ...(historyPointIds.has(point.id) ? { origin: 'history' as const } : {}),
    ...writeCondition(point),
  };
}

/** How it was read where the plan says so: criterion and bandwidth of a sensitivity, a supply of its own. */
function writeCondition({ method, supplyV }: TestPoint): { condition?: string } {
  const words = [method, supplyV === null ? '' : `supply ${supplyV.toFixed(2)} V`];
  const condition = words.filter((text) => text !== '').join(', ');
  return condition === '' ? {} : { condition };
}

function writeUncertainty(judgement: PointJudgement, { format }: Quantity): StatedUncertainty | null {
  const { U, uUnit, k, low, high } = judgement;
  if (U === null || uUnit === null || k === null || low === null || high === null) return null;
  const text = formatUncertainty(U, uUnit, format);
  return { value: U, unit: uUnit, k, low, high, text };
}

/** A limit with its unit: `≥ 2.00 W`, `55.0 mA to 65.0 mA`; empty where there is none. */
export function writeLimit(quantity: Quantity, lower: number | null, upper: number | null): string {
  if (lower !== null && upper !== null) {
    return `${formatValue(lower, quantity)} to ${formatValue(upper, quantity)}`;
  }
  if (lower !== null) return `≥ ${formatValue(lower, quantity)}`;
  return upper === null ? '' : `≤ ${formatValue(upper, quantity)}`;
}

/** As {@link writeLimit}, with a unit that both limits share said once: `2.40 to 3.60 W`, `±100 Hz`. */
function statedLimit(quantity: Quantity, lower: number | null, upper: number | null): string {
  const text = writeLimit(quantity, lower, upper);
  if (lower === null || upper === null) return text;
  const high = formatValue(upper, quantity);
  if (lower === -upper && upper > 0) return `±${high.replace(/^\+/u, '')}`;
  const unit = /[\s\u00a0]\S+$/u.exec(high)?.[0];
  const low = formatValue(lower, quantity);
  return unit !== undefined && low.endsWith(unit) ? `${low.slice(0, -unit.length)} to ${high}` : text;
}

function writeInstrument({ number, name, spec }: RunFacts['instruments'][number]): StatedInstrument {
  return {
    name: `${number} ${name}`,
    grade: spec.grade,
    gradeNote: gradeNoteOf(spec),
    calibrationDueOn: spec.calibration?.dueOn ?? null,
  };
}

/** Against what it was checked, or who calibrated it, when and under which number. */
function gradeNoteOf({ grade, checkedAgainst, calibration }: InstrumentSpec): string {
  if (grade === 'checked') return checkedAgainst === null ? '' : `against ${checkedAgainst}`;
  if (grade === 'unchecked' || calibration === null) return '';
  const { laboratory, certificateNumber, calibratedOn } = calibration;
  return [
    laboratory === null ? '' : `by ${laboratory}`,
    calibratedOn === null ? '' : `on ${formatDay(calibratedOn)}`,
    certificateNumber === null ? '' : `certificate ${certificateNumber}`,
  ]
    .filter((text) => text !== '')
    .join(', ');
}
