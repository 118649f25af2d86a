import { eq } from 'drizzle-orm';
import { holds } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingUserId, write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Ends a hold, saying why it may go.
 *
 * @throws DomainError `not_found`, or `conflict` where it has ended
 */
export async function endHold(
  input: { holdId: number; reason: string },
  ctx: Ctx,
): Promise<{ holdId: number; subjectType: 'unit' | 'lot' | 'batch' | 'order'; subjectId: number }> {
  return write(ctx, async (w) => {
    const [hold] = await w.tx.select().from(holds).where(eq(holds.id, input.holdId)).for('update');
    if (hold === undefined) throw new DomainError('not_found', 'There is no such hold.');
    if (hold.endedAt !== null) throw new DomainError('conflict', 'This hold has ended already.');
    await w.tx
      .update(holds)
      .set({ endedAt: w.now, endedBy: actingUserId(w), endReason: input.reason })
      .where(eq(holds.id, hold.id));
    const { subjectType, subjectId } = hold;
    await w.record({
      action: 'hold.end',
      subjects: [{ type: subjectType, id: subjectId }],
      details: { holdId: hold.id, placedFor: hold.reason, reason: input.reason },
    });
    return { holdId: hold.id, subjectType, subjectId };
  });
}
