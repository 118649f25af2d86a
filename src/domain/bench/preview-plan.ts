import { bandLabel, bandOf } from './bands';
import { formatFrequency, formatValue } from './format';
import { limitDbc } from './limit-rules';
import type { ChosenRule } from './limit-rules';
import { resolvePoints } from './resolve-points';
import type { Region, TestPoint } from './types';

/** One cell of the grid that a rig of some options would be tested by. */
export interface PreviewPoint {
  id: number;
  band: string;
  quantity: string;
  frequency: string;
  /** `at least 4.00 W`, `at most −43.0 dBc`. */
  limit: string;
  /** By which rule, where it is one; and how the point is decided. */
  rule: string;
  required: boolean;
  /** What would keep it from being judged there. */
  problem: string | null;
}

interface Where {
  options: ReadonlySet<string>;
  rule: ChosenRule;
  /** Null for a unit without a destination. */
  region: Region | null;
  /** Power at which limits by rule are shown, W. */
  powerW: number;
}

/** The grid that a plan gives for some options and a destination, with limits by rule at the rated power. */
export function previewPlan(
  points: readonly TestPoint[],
  where: Where,
): { ok: true; points: PreviewPoint[] } | { ok: false; reason: string } {
  const resolved = resolvePoints(points, where.options);
  if (!resolved.ok) return resolved;
  return { ok: true, points: resolved.points.map((point) => previewOf(point, where)) };
}

function previewOf(point: TestPoint, where: Where): PreviewPoint {
  const { quantity, band, freqHz, lower, upper } = point;
  const byRule = point.limitRule === 'spurious' ? ruleLimit(point, where) : null;
  const least = [upper, byRule?.limitDbc].filter((limit) => typeof limit === 'number');
  const highest = least.length === 0 ? null : Math.min(...least);
  const limits = [
    ...(lower === null ? [] : [`at least ${formatValue(lower, quantity)}`]),
    ...(highest === null ? [] : [`at most ${formatValue(highest, quantity)}`]),
  ];
  const isOutside =
    where.region !== null && band !== null && freqHz !== null && bandOf(freqHz, where.region) !== band;
  const outside = isOutside ? `outside ${bandLabel(band)} in Region ${String(where.region)}` : null;
  return {
    id: point.id,
    band: band === null ? '' : bandLabel(band),
    quantity: quantity.label,
    frequency: freqHz === null ? '' : formatFrequency(freqHz),
    limit: limits.length === 0 ? 'none' : limits.join(', '),
    rule:
      byRule === null
        ? `test plan, ${point.decision === 'guarded' ? 'guarded' : 'simple'}`
        : `${byRule.text}, guarded`,
    required: point.required,
    problem: outside ?? byRule?.problem ?? null,
  };
}

/** A spurious product may be anywhere: its limit is shown at no frequency of its own. */
function ruleLimit(point: TestPoint, { rule, powerW }: Where) {
  if (point.freqHz === null) {
    return { text: rule.title, problem: 'the rule needs a test frequency', limitDbc: undefined };
  }
  const { order } = point.quantity;
  const productFreqHz = order === null ? null : order * point.freqHz;
  const limit = limitDbc(rule, { powerW, txFreqHz: point.freqHz, productFreqHz });
  if (limit.ok) return { text: limit.ruleText, problem: null, limitDbc: limit.limitDbc };
  const text = order === null ? `${rule.title}, by the frequency of each product` : rule.title;
  return { text, problem: order === null ? null : limit.reason, limitDbc: undefined };
}
