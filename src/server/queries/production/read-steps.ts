import { and, asc, eq } from 'drizzle-orm';
import { evaluateCondition, parseCondition } from '~/domain/planning/condition';
import type { BuildStage } from '~/domain/production/stages';
import type { StepEntry } from '~/domain/production/steps';
import { stepEntry } from '~/schemas/production-floor';
import type { Reader } from '~/server/db/client';
import { buildSteps, stepRecords, userProfiles } from '~/server/db/schema';
import type { units } from '~/server/db/schema';

/** A build step as it was done. */
export interface StepRecord {
  round: number;
  entry: string | null;
  minutes: number | null;
  doneAt: Date;
  byName: string | null;
}

/** A step of a unit's build sheet that its options call for. */
export interface UnitStep {
  id: number;
  position: number;
  stage: BuildStage;
  title: string;
  instruction: string;
  caution: string;
  minutes: number | null;
  entry: StepEntry | null;
  /** Oldest round first; empty where it is still to be done. */
  records: StepRecord[];
}

/** The build steps of a unit in order, with what was recorded at each. */
export async function readSteps(
  reader: Reader,
  unit: Pick<typeof units.$inferSelect, 'id' | 'buildSheetRevisionId' | 'options'>,
): Promise<UnitStep[]> {
  if (unit.buildSheetRevisionId === null) return [];
  const rows = await reader
    .select({ step: buildSteps, record: stepRecords, byName: userProfiles.name })
    .from(buildSteps)
    .leftJoin(stepRecords, and(eq(stepRecords.buildStepId, buildSteps.id), eq(stepRecords.unitId, unit.id)))
    .leftJoin(userProfiles, eq(userProfiles.userId, stepRecords.byUserId))
    .where(eq(buildSteps.buildSheetRevisionId, unit.buildSheetRevisionId))
    .orderBy(asc(buildSteps.position), asc(stepRecords.round));
  const chosen = new Set(unit.options);
  const steps = new Map<number, UnitStep>();
  for (const { step, record, byName } of rows) {
    if (!applies(step.condition, chosen)) continue;
    const { id, position, stage, title, instruction, caution, minutes } = step;
    const entry = step.entry === null ? null : stepEntry.parse(step.entry);
    const known = steps.get(id) ?? {
      ...{ id, position, stage, title, instruction, caution, minutes, entry },
      records: [],
    };
    steps.set(id, known);
    if (record === null) continue;
    known.records.push({
      round: record.round,
      entry: record.entry,
      minutes: record.minutes,
      doneAt: record.doneAt,
      byName,
    });
  }
  return [...steps.values()];
}

/** A released build sheet has only conditions that can be read; one that cannot be is shown rather than hidden. */
function applies(condition: string | null, chosen: ReadonlySet<string>): boolean {
  if (condition === null) return true;
  const parsed = parseCondition(condition);
  return !parsed.ok || evaluateCondition(parsed.ast, chosen);
}
