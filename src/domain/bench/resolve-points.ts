import { evaluateCondition, parseCondition } from '~/domain/planning/condition';
import type { TestPoint } from './types';

/**
 * The points of a test plan that apply to a unit's options, in order.
 *
 * @returns a reason where a condition cannot be read: the plan should not have been released
 */
export function resolvePoints<P extends Pick<TestPoint, 'condition' | 'position'>>(
  points: readonly P[],
  chosen: ReadonlySet<string>,
): { ok: true; points: P[] } | { ok: false; reason: string } {
  const resolved: P[] = [];
  for (const point of [...points].sort((a, b) => a.position - b.position)) {
    if (point.condition === null) {
      resolved.push(point);
      continue;
    }
    const parsed = parseCondition(point.condition);
    if (!parsed.ok)
      return { ok: false, reason: `The condition of test point ${point.position}: ${parsed.reason}` };
    if (evaluateCondition(parsed.ast, chosen)) resolved.push(point);
  }
  return { ok: true, points: resolved };
}
