import type { LotCount } from '~/schemas/stores-lots';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockLot } from './lock-lot';
import { moveStock } from './move-stock';

/**
 * Takes a lot as counted: the difference to the books becomes a move that says why.
 *
 * @throws DomainError `not_found`, or `conflict` where the books agree with the count
 */
export async function countLot(
  input: LotCount & { lot: string },
  ctx: Ctx,
): Promise<{ entryId: number; number: string; difference: number; onHand: number }> {
  return write(ctx, async (w) => {
    const lot = await lockLot(w.tx, input.lot);
    const before = lot.onHand;
    const difference = input.counted - before;
    if (difference === 0) {
      throw new DomainError(
        'conflict',
        `The books have ${before} in lot ${lot.number} too; nothing is to be moved.`,
      );
    }
    const entryId = await moveStock(w, lot, { kind: 'count', quantity: difference, reason: input.reason });
    await w.record({
      action: 'lot.count',
      subjects: [
        { type: 'lot', id: lot.id },
        { type: 'part', id: lot.partId },
      ],
      details: { lot: lot.number, onHand: { from: before, to: input.counted }, reason: input.reason },
    });
    return { entryId, number: lot.number, difference, onHand: lot.onHand };
  });
}
