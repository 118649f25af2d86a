import { and, eq, isNotNull } from 'drizzle-orm';
import type { UnitStage } from '~/domain/production/stages';
import { picks, reworks } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readKit } from '~/server/queries/production/read-kit';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { lockUnit } from './lock-unit';

/**
 * Ends a unit's rework with what was found behind it, its remedy and the minutes it took; the unit goes on at its final test, or at
 * the build stage where it was.
 *
 * @throws DomainError `not_found`, or `conflict` where no rework is open or a part that was put back is not replaced
 */
export async function closeRework(
  input: {
    serial: string;
    remedy: string;
    minutes?: number | undefined;
    foundCause?: string | undefined;
  },
  ctx: Ctx,
): Promise<{ reworkId: number; serial: string; stage: UnitStage }> {
  return write(ctx, async (w) => {
    const { row: unit, openReworkId } = await lockUnit(w.tx, input.serial);
    if (openReworkId === null) throw new DomainError('conflict', `${unit.serial} is not in rework.`);
    const putBack = await linesPutBack(w, unit.id);
    const lacking = (await readKit(w.tx, unit)).filter(
      (line) => putBack.has(line.lineId) && line.missing > 0,
    );
    if (lacking.length > 0) {
      const parts = lacking.map((line) => `${line.part.partNumber} (${line.missing})`).join(', ');
      throw new DomainError('conflict', `${unit.serial} lacks ${parts}, which was put back. Pick it first.`);
    }
    const minutes = input.minutes ?? null;
    await w.tx
      .update(reworks)
      .set({
        remedy: input.remedy,
        minutes,
        // What was found earlier stands where nothing is said now.
        ...(input.foundCause === undefined ? {} : { foundCause: input.foundCause }),
        closedAt: w.now,
        closedBy: actingUserId(w),
      })
      .where(eq(reworks.id, openReworkId));
    await w.record({
      action: 'rework.close',
      subjects: [{ type: 'unit', id: unit.id }],
      details: { cause: input.foundCause ?? null, remedy: input.remedy, minutes },
    });
    return { reworkId: openReworkId, serial: unit.serial, stage: unit.stage };
  });
}

/** Lines of which a part was once picked and put back. */
async function linesPutBack(w: WriteContext, unitId: number): Promise<Set<number | null>> {
  const rows = await w.tx
    .select({ lineId: picks.bomLineId })
    .from(picks)
    .where(and(eq(picks.unitId, unitId), isNotNull(picks.undoneByEntryId)));
  return new Set(rows.map(({ lineId }) => lineId));
}
