import { checkouts } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';

/** The provider keeps a payment page open for 30 minutes at least by its own clock; one more covers the way. */
const lifeMs = 31 * 60_000;

/** Writes a checkout that is to be opened at the provider after the commit. Part of a service call. */
export async function addCheckout(
  w: WriteContext,
  checkout: { orderId: number; amountMinor: number; purpose: 'order' | 'balance' },
): Promise<number> {
  const [{ insertId }] = await w.tx.insert(checkouts).values({
    ...checkout,
    state: 'wanted',
    createdAt: w.now,
    expiresAt: new Date(w.now.getTime() + lifeMs),
  });
  return insertId;
}
