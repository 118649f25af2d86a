import { eq } from 'drizzle-orm';
import { checkStepEntry, stageAfterSteps } from '~/domain/production/steps';
import type { UnitStage } from '~/domain/production/stages';
import { unitCan } from '~/domain/production/unit-status';
import { formatTimeOf } from '~/lib/dates';
import type { Tick } from '~/schemas/production-floor';
import { reworks, stepRecords } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { getWorks } from '~/server/queries/office/get-works';
import { readSteps } from '~/server/queries/production/read-steps';
import type { StepRecord, UnitStep } from '~/server/queries/production/read-steps';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { advanceUnit } from './advance-unit';
import { lockUnit, mustBeAllowed } from './lock-unit';
import type { LockedUnit } from './lock-unit';

/**
 * Ticks a build step of a unit, with what it asks to be written down. The last step of a stage tears its
 * stub off. In rework a step that was done is ticked again, as its next round.
 *
 * @throws DomainError `not_found`, `refused` (the entry), or `conflict` where the step was ticked already,
 * is of a stage where the unit is not, or a hold is on the unit
 */
export async function tickStep(
  input: Tick & { serial: string },
  ctx: Ctx,
): Promise<{ serial: string; title: string; round: number; stage: UnitStage }> {
  return write(ctx, async (w) => {
    const unit = await lockUnit(w.tx, input.serial);
    const { serial } = unit.row;
    const steps = await readSteps(w.tx, unit.row);
    const step = steps.find(({ id }) => id === input.stepId);
    if (step === undefined)
      throw new DomainError('not_found', `The build sheet of ${serial} has no such step.`);
    const round = await roundOf(w, unit, step);
    const before = step.records.find((record) => record.round === round);
    if (before !== undefined) throw new DomainError('conflict', await tickedAlready(w, step, before));
    mustBeAllowed(serial, unitCan.tick(unit.facts, step.stage));
    const entry = checkStepEntry(step.entry, input.entry);
    if (!entry.ok) throw new DomainError('refused', entry.reason, { entry: entry.reason });
    await w.tx.insert(stepRecords).values({
      unitId: unit.row.id,
      buildStepId: step.id,
      round,
      entry: entry.entry,
      entryValue: entry.value,
      minutes: input.minutes ?? null,
      doneAt: w.now,
      byUserId: actingUserId(w),
    });
    const stage = stageAfterSteps(
      unit.row.stage,
      steps.map((one) => ({ stage: one.stage, done: one.id === step.id || one.records.length > 0 })),
    );
    await advanceUnit(w, unit.row, stage);
    await w.record({
      action: 'step.tick',
      subjects: [{ type: 'unit', id: unit.row.id }],
      details: {
        ...{ step: step.title, round, entry: entry.entry, minutes: input.minutes ?? null },
        ...(stage === unit.row.stage ? {} : { stage: { from: unit.row.stage, to: stage } }),
      },
    });
    return { serial, title: step.title, round, stage };
  });
}

/** 1 for a step that was never done; in rework, one more than the reworks before this one. */
async function roundOf(w: WriteContext, unit: LockedUnit, step: UnitStep): Promise<number> {
  if (step.records.length === 0 || unit.openReworkId === null) return 1;
  const all = await w.tx.select({ id: reworks.id }).from(reworks).where(eq(reworks.unitId, unit.row.id));
  return 1 + all.length;
}

async function tickedAlready(w: WriteContext, step: UnitStep, record: StepRecord): Promise<string> {
  const { timeZone } = await getWorks(w.tx);
  const by = record.byName === null ? '' : ` by ${record.byName}`;
  return `“${step.title}” was ticked already${by}, ${formatTimeOf(record.doneAt, timeZone)}. It was left as it is.`;
}
