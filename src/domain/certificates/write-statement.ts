import { bandLabel } from '~/domain/bench/bands';
import { formatAtMeter, formatUncertainty, formatValue } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { LIMIT_RULES } from '~/domain/bench/limit-rules';
import type { LimitRuleKey } from '~/domain/bench/limit-rules';
import { quantityOf } from '~/domain/bench/quantities';
import type { InstrumentSpec, PathSpec, TestPoint } from '~/domain/bench/types';
import type { CertificateStatement, StatedInstrument, StatedPoint, StatedUncertainty } from './statement';
import { listed } from '~/lib/listed';

/** A judged test point of a closed run. */
export interface JudgedPoint {
  point: TestPoint;
  judgement: PointJudgement;
}

/** Everything that the readings part of a certificate is written from. */
export interface RunFacts {
  points: readonly JudgedPoint[];
  ruleKey: LimitRuleKey;
  destinationCountry: string | null;
  instruments: readonly { number: string; name: string; spec: InstrumentSpec }[];
  paths: readonly { number: string; name: string; spec: PathSpec }[];
}

type WrittenParts = Pick<
  CertificateStatement,
  'points' | 'instruments' | 'path' | 'decisionRule' | 'conformity' | 'notAssessed' | 'cautions'
>;

const DECISION_RULE =
  'A legal limit is decided with a guard band as wide as the expanded uncertainty (w = U, ILAC-G8:09/2019, 4.2.3); ' +
  'a limit of the works’ own as the test plan says, guarded or simple (w = 0). Too close to call is no pass.';

const CAUTIONS = [
  'The results are of this unit alone, as it was tested. This is not a type approval.',
  'Transmitting needs a licence; the limits where you are depend on local rules, and your administration decides.',
  'RF burns, and the output stage and its sink get hot: mind your hands, and use a dummy load rated for the power.',
];

/** Writes what a closed run says, in words and figures; the figures that were judged stand beside the rounded ones. */
export function writeRunParts(facts: RunFacts): WrittenParts {
  return {
    points: facts.points.map((judged) => writePoint(judged)),
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

function writePoint({ point, judgement }: JudgedPoint): StatedPoint {
  const quantity = quantityOf(point.quantityKey);
  const { value, atMeter, lower, upper, ruleText, verdict, n, atMost } = judgement;
  if (value === null || atMeter === null) throw new Error('A certificate states only what was read.');
  const least = atMost ? '≤ ' : '';
  return {
    label: quantity?.label ?? point.quantityKey,
    quantityKey: point.quantityKey,
    band: point.band === null ? null : bandLabel(point.band),
    freqHz: point.freqHz,
    value,
    unit: quantity?.unit ?? '',
    text: least + formatValue(value, point.quantityKey),
    atMeterText: least + formatAtMeter(atMeter, point.quantityKey),
    uncertainty: writeUncertainty(judgement),
    n,
    lower,
    upper,
    limitText: writeLimit(point.quantityKey, lower, upper),
    ruleText: ruleText ?? 'works’ own',
    decision: point.limitRule === 'spurious' ? 'guarded' : point.decision,
    verdict,
    concession: null,
  };
}

function writeUncertainty(judgement: PointJudgement): StatedUncertainty | null {
  const { U, uUnit, k, low, high } = judgement;
  if (U === null || uUnit === null || k === null || low === null || high === null) return null;
  const text = formatUncertainty(U, uUnit);
  return { value: U, unit: uUnit, k, low, high, text };
}

function writeLimit(quantityKey: string, lower: number | null, upper: number | null): string {
  if (lower !== null && upper !== null) {
    return `${formatValue(lower, quantityKey)} to ${formatValue(upper, quantityKey)}`;
  }
  if (lower !== null) return `≥ ${formatValue(lower, quantityKey)}`;
  return upper === null ? '' : `≤ ${formatValue(upper, quantityKey)}`;
}

function writeInstrument({ number, name, spec }: RunFacts['instruments'][number]): StatedInstrument {
  return {
    name: `${number} ${name}`,
    grade: spec.grade,
    gradeNote: spec.checkedAgainst ?? '',
    calibrationDueOn: spec.calibration?.dueOn ?? null,
  };
}

/** Which harmonics, which bands and which rule the statement covers. */
function writeConformity({ points, ruleKey, destinationCountry }: RunFacts): string[] {
  const orders = [...new Set(points.flatMap(({ point }) => quantityOf(point.quantityKey)?.order ?? []))].sort(
    (a, b) => a - b,
  );
  const bands = [
    ...new Set(points.flatMap(({ point }) => (point.band === null ? [] : [bandLabel(point.band)]))),
  ];
  const rule = LIMIT_RULES[ruleKey];
  const where =
    destinationCountry === null ? 'for a unit without a buyer' : `for the destination ${destinationCountry}`;
  const sentences: string[] = [];
  if (orders.length > 0) {
    sentences.push(
      `On ${listed(bands)} the ${listed(orders.map(ordinal))} harmonic of the carrier ${orders.length === 1 ? 'is' : 'are each'} ` +
        `inside ${rule.title} (${rule.source}) at the measured power by more than its expanded uncertainty, ${where}.`,
    );
  }
  const own = [
    ...new Set(
      points.flatMap(({ point }) =>
        point.limitRule === 'fixed'
          ? [inText(quantityOf(point.quantityKey)?.label ?? point.quantityKey)]
          : [],
      ),
    ),
  ];
  if (own.length > 0)
    sentences.push(`The ${listed(own)} ${own.length === 1 ? 'is' : 'are'} inside the works’ own limits.`);
  return sentences;
}

function writeNotAssessed({ points, ruleKey }: RunFacts): string[] {
  const orders = points.flatMap(({ point }) => quantityOf(point.quantityKey)?.order ?? []);
  const highest = Math.max(0, ...orders);
  const rule = LIMIT_RULES[ruleKey];
  return [
    ...(highest > 0 ? [`Harmonics above the ${ordinal(highest)} were not assessed.`] : []),
    ...(points.some(({ point }) => point.quantityKey === 'spurious')
      ? []
      : ['Products other than the harmonics named were not assessed.']),
    'Not assessed to EN 301 783.',
    ...(rule.certainty === 'read'
      ? []
      : [`The text of ${rule.title} was taken ${certaintyWords[rule.certainty]}.`]),
  ];
}

const certaintyWords = { 'read in quotation': 'from quotation', 'from memory': 'from memory' } as const;

function ordinal(order: number): string {
  if (order === 2) return '2nd';
  return order === 3 ? '3rd' : `${order}th`;
}

/** `Current, key down` within a sentence: `current key down`. */
function inText(label: string): string {
  return label.replace(',', '').toLowerCase();
}
