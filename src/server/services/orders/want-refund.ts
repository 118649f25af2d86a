import { refunds } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';
import { actingUserId } from '~/server/write';

/** Writes a refund that the provider is to make after the commit. Part of a service call. */
export async function wantRefund(
  w: WriteContext,
  refund: { paymentId: number; amountMinor: number; currency: string; reason: string },
): Promise<number> {
  const [{ insertId }] = await w.tx
    .insert(refunds)
    .values({ ...refund, state: 'wanted', createdAt: w.now, byUserId: actingUserId(w) });
  await w.post({ kind: 'refund', key: `refund:${insertId}`, payload: { refundId: insertId } });
  return insertId;
}
