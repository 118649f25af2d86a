import { eq } from 'drizzle-orm';
import { stageAfterSteps } from '~/domain/production/steps';
import type { UnitStage } from '~/domain/production/stages';
import { unitCan } from '~/domain/production/unit-status';
import { batches, stepRecords } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readKit } from '~/server/queries/production/read-kit';
import { readSteps } from '~/server/queries/production/read-steps';
import type { UnitStep } from '~/server/queries/production/read-steps';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { advanceUnit } from './advance-unit';
import { lockUnit, mustBeAllowed } from './lock-unit';

/**
 * Tears off the kit: every line is picked, or issued to the batch. Who finishes it says that the steps of
 * the kit were done; they are ticked with it, the minutes on the first.
 *
 * @throws DomainError `not_found`, or `conflict` where something is missing or a hold is on it
 */
export async function finishKit(
  input: { serial: string; minutes?: number | undefined },
  ctx: Ctx,
): Promise<{ serial: string; stage: UnitStage }> {
  return write(ctx, async (w) => {
    const { row: unit, facts } = await lockUnit(w.tx, input.serial);
    mustBeAllowed(unit.serial, unitCan.tick(facts, 'kit'));
    if (unit.stage !== 'kit')
      throw new DomainError('conflict', `The kit of ${unit.serial} is finished already.`);
    // Two kits must not both be finished with the same parts of their batch.
    if (unit.batchId !== null) {
      await w.tx.select({ id: batches.id }).from(batches).where(eq(batches.id, unit.batchId)).for('update');
    }
    const kit = await readKit(w.tx, unit);
    const missing = kit.filter((line) => line.missing > 0);
    if (missing.length > 0) {
      const some = missing.slice(0, 6).map((line) => `${line.part.partNumber} (${line.missing})`);
      const more = missing.length > some.length ? ` and ${missing.length - some.length} more` : '';
      throw new DomainError('conflict', `The kit of ${unit.serial} still lacks ${some.join(', ')}${more}.`);
    }
    const steps = await readSteps(w.tx, unit);
    await tickKitSteps(w, unit.id, steps, input.minutes);
    const afterKit = steps.filter((step) => step.stage !== 'kit');
    const stage = stageAfterSteps(
      'boards',
      afterKit.map((step) => ({ stage: step.stage, done: step.records.length > 0 })),
    );
    await advanceUnit(w, unit, stage);
    await w.record({
      action: 'kit.finish',
      subjects: [{ type: 'unit', id: unit.id }],
      details: {
        stage: { from: unit.stage, to: stage },
        lines: kit.length,
        minutes: input.minutes ?? null,
        alternates: kit.flatMap((line) => line.picks.filter((pick) => pick.alternateReason !== null)).length,
      },
    });
    return { serial: unit.serial, stage };
  });
}

async function tickKitSteps(
  w: WriteContext,
  unitId: number,
  steps: readonly UnitStep[],
  minutes: number | undefined,
): Promise<void> {
  const open = steps.filter((step) => step.stage === 'kit' && step.records.length === 0);
  const asking = open.find((step) => step.entry !== null);
  if (asking !== undefined) {
    throw new DomainError(
      'conflict',
      `“${asking.title}” asks for an entry; tick it on the build page first.`,
    );
  }
  if (open.length === 0) return;
  await w.tx.insert(stepRecords).values(
    open.map((step, index) => ({
      unitId,
      buildStepId: step.id,
      round: 1,
      minutes: index === 0 ? (minutes ?? null) : null,
      doneAt: w.now,
      byUserId: actingUserId(w),
    })),
  );
}
