import { eq } from 'drizzle-orm';
import { reversalOf } from '~/domain/stores/ledger';
import { picks, storeEntries } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { WriteContext } from '~/server/write';
import type { LockedLot } from './lock-lot';
import { moveStock } from './move-stock';

/**
 * Takes one line of a locked lot's ledger back by another line. A pick that stood on it is no longer in its
 * unit or batch; whether that unit may still be changed is the caller's to ask.
 *
 * @throws DomainError `not_found`, or `conflict` where it was reversed before or cannot be
 */
export async function reverseMove(
  w: WriteContext,
  lot: LockedLot,
  entryId: number,
  reason: string,
): Promise<{ reversalId: number; quantity: number }> {
  const entries = await w.tx
    .select({
      id: storeEntries.id,
      lotId: storeEntries.lotId,
      quantity: storeEntries.quantity,
      reversesId: storeEntries.reversesId,
    })
    .from(storeEntries)
    .where(eq(storeEntries.lotId, lot.id));
  const entry = entries.find(({ id }) => id === entryId);
  if (entry === undefined) throw new DomainError('not_found', `Lot ${lot.number} has no such entry.`);
  const reversal = reversalOf(entry, entries);
  if (!reversal.ok) throw new DomainError('conflict', reversal.reason);
  const { quantity } = reversal;
  const reversalId = await moveStock(w, lot, { kind: 'reversal', quantity, reason, reversesId: entryId });
  await w.tx.update(picks).set({ undoneByEntryId: reversalId }).where(eq(picks.storeEntryId, entryId));
  return { reversalId, quantity };
}
