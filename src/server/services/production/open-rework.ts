import { isPast } from '~/domain/production/stages';
import { unitCan } from '~/domain/production/unit-status';
import { reworks } from '~/server/db/schema';
import { actingUserId, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { advanceUnit } from './advance-unit';
import { lockUnit, mustBeAllowed } from './lock-unit';

/**
 * Puts a unit into rework with its cause. One that had passed its final test goes back to it.
 *
 * @param input.testRunId the run that showed it, if one did
 * @throws DomainError `not_found`, or `conflict` where it is in rework, not kitted yet, or gone
 */
export async function openRework(
  input: { serial: string; cause: string; testRunId?: number | undefined },
  ctx: Ctx,
): Promise<{ reworkId: number; serial: string }> {
  return write(ctx, async (w) => {
    const { row: unit, facts } = await lockUnit(w.tx, input.serial);
    mustBeAllowed(unit.serial, unitCan.rework(facts));
    const [rework] = await w.tx.insert(reworks).values({
      unitId: unit.id,
      testRunId: input.testRunId ?? null,
      cause: input.cause,
      openedAt: w.now,
      openedBy: actingUserId(w),
    });
    const stage = isPast('final_test', unit.stage) ? 'final_test' : unit.stage;
    await advanceUnit(w, unit, stage);
    await w.record({
      action: 'rework.open',
      subjects: [
        { type: 'unit', id: unit.id },
        ...(input.testRunId === undefined ? [] : [{ type: 'run' as const, id: input.testRunId }]),
      ],
      details: {
        cause: input.cause,
        ...(stage === unit.stage ? {} : { stage: { from: unit.stage, to: stage } }),
      },
    });
    return { reworkId: rework.insertId, serial: unit.serial };
  });
}
