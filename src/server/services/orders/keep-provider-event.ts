import { eq } from 'drizzle-orm';
import { providerEvents } from '~/server/db/schema';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';

/**
 * Keeps an event of the payment provider as it came, once, whatever it says and however often it arrives.
 * It takes effect by {@link applyProviderEvent}.
 */
export async function keepProviderEvent(
  input: { eventId: string; type: string; objectId: string; body: string },
  ctx: Ctx,
): Promise<{ providerEventId: number; isNew: boolean }> {
  return write(ctx, async (w) => {
    const [inserted] = await w.tx
      .insert(providerEvents)
      .ignore()
      .values({ ...input, type: input.type.slice(0, 100), state: 'kept', receivedAt: w.now });
    const isNew = inserted.affectedRows === 1;
    const [row] = await w.tx
      .select({ id: providerEvents.id })
      .from(providerEvents)
      .where(eq(providerEvents.eventId, input.eventId));
    if (row === undefined) throw new Error(`Event ${input.eventId} was neither kept nor found.`);
    await w.record({
      action: isNew ? 'event.keep' : 'event.arrive_again',
      subjects: [{ type: 'event', id: row.id }],
      details: { type: input.type },
    });
    return { providerEventId: row.id, isNew };
  });
}
