import { eq } from 'drizzle-orm';
import { checkouts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';

/** Keeps the provider's answer: its session and the address of its payment page. Repeating it changes nothing. */
export async function storeCheckoutSession(
  input: { checkoutId: number; sessionId: string; url: string },
  ctx: Ctx,
): Promise<{ checkoutId: number }> {
  const { checkoutId, sessionId, url } = input;
  return write(ctx, async (w) => {
    const [checkout] = await w.tx.select().from(checkouts).where(eq(checkouts.id, checkoutId)).for('update');
    if (checkout === undefined) throw new DomainError('not_found', 'There is no such checkout.');
    // Its payment or its end may have been told before this answer came back.
    const state = checkout.state === 'wanted' ? 'open' : checkout.state;
    await w.tx
      .update(checkouts)
      .set({ providerSessionId: sessionId, url, state })
      .where(eq(checkouts.id, checkoutId));
    await w.record({
      action: 'checkout.open',
      subjects: [{ type: 'order', id: checkout.orderId }],
      details: { checkoutId, state: { from: checkout.state, to: state } },
    });
    return { checkoutId };
  });
}
