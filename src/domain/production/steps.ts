import type { BuildStage, UnitStage } from './stages';
import { nextStage } from './stages';

/** What is to be written down at a build step: a number with a unit and limits, or, without a unit, a remark. */
export interface StepEntry {
  label: string;
  unit: string | null;
  lower: number | null;
  upper: number | null;
}

/**
 * Where a unit stands once the steps of its stage are done: it goes on past every build stage that has none
 * left to do. The kit is left by finishing it, not by its steps.
 */
export function stageAfterSteps(
  stage: UnitStage,
  steps: readonly { stage: BuildStage; done: boolean }[],
): UnitStage {
  let at = stage;
  while ((at === 'boards' || at === 'align') && steps.every((step) => step.stage !== at || step.done)) {
    at = nextStage(at);
  }
  return at;
}

/**
 * Checks what was entered at a step against what it asks for.
 *
 * @param text as typed; a decimal comma and the minus sign − are understood
 */
export function checkStepEntry(
  asked: StepEntry | null,
  text: string | undefined,
): { ok: true; entry: string | null; value: number | null } | { ok: false; reason: string } {
  const typed = text?.trim() ?? '';
  if (asked === null) return { ok: true, entry: typed === '' ? null : typed, value: null };
  if (typed === '') return { ok: false, reason: `Enter ${asked.label}.` };
  if (asked.unit === null) return { ok: true, entry: typed, value: null };
  const bare = typed.endsWith(asked.unit) ? typed.slice(0, -asked.unit.length).trim() : typed;
  const value = Number(bare.replace('−', '-').replace(',', '.'));
  if (bare === '' || !Number.isFinite(value)) {
    return { ok: false, reason: `“${typed}” is not a number of ${asked.unit}.` };
  }
  const shown = `${bare} ${asked.unit}`;
  if (asked.lower !== null && value < asked.lower) {
    return {
      ok: false,
      reason: `${shown} is below ${asked.lower} ${asked.unit}. Put it right before the step is done.`,
    };
  }
  if (asked.upper !== null && value > asked.upper) {
    return {
      ok: false,
      reason: `${shown} is over ${asked.upper} ${asked.unit}. Put it right before the step is done.`,
    };
  }
  return { ok: true, entry: shown, value };
}
