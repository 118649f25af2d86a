import type { QuantityBook } from '~/domain/bench/quantities';
import { keysOf, parseCondition } from '~/domain/planning/condition';
import type { OptionGroup } from '~/domain/planning/configuration';

type Answer = { ok: true } | { ok: false; reasons: string[] };

/** Whether a build sheet can be released: it has steps, and each condition can be read and names options of the model. */
export function checkBuildSheet(
  steps: readonly { position: number; title: string; condition: string | null }[],
  groups: readonly OptionGroup[],
): Answer {
  if (steps.length === 0) return { ok: false, reasons: ['The build sheet has no step.'] };
  return answer(
    steps.flatMap(({ position, title, condition }) =>
      conditionFaults(`Step ${position} (${title})`, condition, groups),
    ),
  );
}

/** Whether a test plan can be released: it has points, each of a known quantity, with a limit that can be met. */
export function checkTestPlan(
  points: readonly {
    position: number;
    quantityKey: string;
    lower: number | null;
    upper: number | null;
    limitRule: 'fixed' | 'spurious';
    condition: string | null;
  }[],
  groups: readonly OptionGroup[],
  quantities: QuantityBook,
): Answer {
  if (points.length === 0) return { ok: false, reasons: ['The test plan has no point.'] };
  return answer(
    points.flatMap((point) => {
      const where = `Point ${point.position}`;
      const { lower, upper } = point;
      return [
        ...(quantities.has(point.quantityKey)
          ? []
          : [`${where}: there is no quantity “${point.quantityKey}”.`]),
        ...(point.limitRule === 'fixed' && lower === null && upper === null
          ? [`${where} has no limit.`]
          : []),
        ...(lower !== null && upper !== null && lower > upper
          ? [`${where}: the lower limit is above the upper one.`]
          : []),
        ...conditionFaults(where, point.condition, groups),
      ];
    }),
  );
}

function conditionFaults(where: string, condition: string | null, groups: readonly OptionGroup[]): string[] {
  if (condition === null) return [];
  const parsed = parseCondition(condition);
  if (!parsed.ok) return [`${where}, condition “${condition}”: ${parsed.reason}`];
  const known = new Set(groups.flatMap((group) => group.options.map((option) => option.key)));
  return [...keysOf(parsed.ast)]
    .filter((key) => !known.has(key))
    .map((key) => `${where}: the model has no option “${key}”.`);
}

function answer(reasons: string[]): Answer {
  return reasons.length === 0 ? { ok: true } : { ok: false, reasons };
}
