import { eq } from 'drizzle-orm';
import { reworks } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockUnit } from './lock-unit';

/**
 * Writes down what was found behind a unit's open rework. It can be corrected until the rework is closed, and counts
 * among the works' causes once the next run has passed.
 *
 * @throws DomainError `not_found`, or `conflict` where no rework is open
 */
export async function findCause(
  input: { serial: string; foundCause: string },
  ctx: Ctx,
): Promise<{ reworkId: number; serial: string; foundCause: string }> {
  const { foundCause } = input;
  return write(ctx, async (w) => {
    const { row: unit, openReworkId } = await lockUnit(w.tx, input.serial);
    if (openReworkId === null) throw new DomainError('conflict', `${unit.serial} is not in rework.`);
    const [before] = await w.tx
      .select({ foundCause: reworks.foundCause })
      .from(reworks)
      .where(eq(reworks.id, openReworkId));
    await w.tx.update(reworks).set({ foundCause }).where(eq(reworks.id, openReworkId));
    await w.record({
      action: 'rework.find_cause',
      subjects: [{ type: 'unit', id: unit.id }],
      details: { cause: { from: before?.foundCause ?? null, to: foundCause } },
    });
    return { reworkId: openReworkId, serial: unit.serial, foundCause };
  });
}
