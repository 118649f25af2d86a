import { eq } from 'drizzle-orm';
import { checkEntry } from '~/domain/stores/ledger';
import { lots, storeEntries } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingUserId } from '~/server/write';
import type { WriteContext } from '~/server/write';

interface Move {
  kind: (typeof storeEntries.$inferInsert)['kind'];
  /** Into the lot positive, out of it negative. */
  quantity: number;
  reason?: string;
  reversesId?: number;
}

/**
 * Writes one line of the store's ledger and keeps the lot's on hand with it. The lot must be locked by the
 * caller; its `onHand` is brought up to date so that several moves may follow one another.
 *
 * @throws DomainError `conflict` where the lot would fall below zero
 */
export async function moveStock(
  w: WriteContext,
  lot: { id: number; number: string; onHand: number },
  move: Move,
): Promise<number> {
  const checked = checkEntry(lot.onHand, move.quantity);
  if (!checked.ok) throw new DomainError('conflict', `Lot ${lot.number}: ${checked.reason}`);
  const [entry] = await w.tx.insert(storeEntries).values({
    lotId: lot.id,
    kind: move.kind,
    quantity: move.quantity,
    reason: move.reason ?? '',
    reversesId: move.reversesId ?? null,
    at: w.now,
    byUserId: actingUserId(w),
  });
  await w.tx.update(lots).set({ onHand: checked.onHand }).where(eq(lots.id, lot.id));
  lot.onHand = checked.onHand;
  return entry.insertId;
}
