import { eq, sql } from 'drizzle-orm';
import type { LotStateChange } from '~/schemas/stores-lots';
import { lots } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockLot } from './lock-lot';

/**
 * Makes a lot usable, sets it waiting, or bars it with a reason. What is in units already stays there: the
 * lot's page shows where.
 *
 * @throws DomainError `not_found`, or `conflict` where it is in that state already
 */
export async function setLotState(
  input: LotStateChange & { lot: string },
  ctx: Ctx,
): Promise<{ lotId: number; number: string; state: LotStateChange['state'] }> {
  return write(ctx, async (w) => {
    const lot = await lockLot(w.tx, input.lot);
    if (lot.state === input.state)
      throw new DomainError('conflict', `Lot ${lot.number} is ${lot.state} already.`);
    const barredReason = input.state === 'barred' ? (input.reason ?? null) : null;
    await w.tx
      .update(lots)
      .set({ state: input.state, barredReason, version: sql`${lots.version} + 1` })
      .where(eq(lots.id, lot.id));
    await w.record({
      action: input.state === 'barred' ? 'lot.bar' : 'lot.set_state',
      subjects: [
        { type: 'lot', id: lot.id },
        { type: 'part', id: lot.partId },
      ],
      details: { lot: lot.number, state: { from: lot.state, to: input.state }, reason: input.reason ?? null },
    });
    return { lotId: lot.id, number: lot.number, state: input.state };
  });
}
