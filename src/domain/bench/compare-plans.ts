import { bandLabel } from './bands';
import { formatFrequency } from './format';
import { writeLimit } from './plan-lines';
import type { TestPoint } from './types';

/** What became of one point between two revisions. */
export interface PlanDifference {
  what: string;
  kind: 'added' | 'removed' | 'changed';
  /** In words, field by field; empty for a point that is there in one of them only. */
  changes: { field: string; from: string; to: string }[];
}

/** Where two revisions of a test plan differ, in the order of the newer one; points that moved alone do not differ. */
export function comparePlans(older: readonly TestPoint[], newer: readonly TestPoint[]): PlanDifference[] {
  const left = new Map(older.map((point) => [identityOf(point), point]));
  const right = new Set(newer.map(identityOf));
  return [
    ...newer.flatMap((point): PlanDifference[] => {
      const before = left.get(identityOf(point));
      if (before === undefined) return [{ what: nameOf(point), kind: 'added', changes: [] }];
      const changes = changesOf(before, point);
      return changes.length === 0 ? [] : [{ what: nameOf(point), kind: 'changed', changes }];
    }),
    ...older
      .filter((point) => !right.has(identityOf(point)))
      .map((point): PlanDifference => ({ what: nameOf(point), kind: 'removed', changes: [] })),
  ];
}

/** Points are told apart by what they ask and of which rigs. */
function identityOf({ quantity, band, condition, method, supplyV }: TestPoint): string {
  return JSON.stringify([quantity.key, band, condition, method, supplyV]);
}

function nameOf({ quantity, band, condition }: TestPoint): string {
  const place = band === null ? '' : `${bandLabel(band)}, `;
  return `${place}${quantity.label.toLowerCase()}${condition === null ? '' : ` (${condition})`}`;
}

function changesOf(before: TestPoint, after: TestPoint): PlanDifference['changes'] {
  const said = (point: TestPoint) => ({
    frequency: point.freqHz === null ? 'none' : formatFrequency(point.freqHz),
    'at least': writeLimit(point.lower, point.quantity) || 'none',
    'at most': writeLimit(point.upper, point.quantity) || 'none',
    limit: point.limitRule === 'spurious' ? 'by the rule of the destination' : 'fixed',
    decision: point.decision === 'guarded' ? 'guarded' : 'simple',
    required: point.required ? 'yes' : 'no',
  });
  const [from, to] = [said(before), said(after)];
  return Object.entries(to).flatMap(([field, text]) => {
    const earlier = Object.entries(from).find(([key]) => key === field)?.[1] ?? '';
    return earlier === text ? [] : [{ field, from: earlier, to: text }];
  });
}
