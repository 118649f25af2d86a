import { eq } from 'drizzle-orm';
import type { LotState } from '~/domain/stores/lots';
import { normaliseScan } from '~/lib/serials';
import type { Tx } from '~/server/db/client';
import { lots, parts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';

/** A lot under its row lock, with the part that it is of. */
export interface LockedLot {
  id: number;
  number: string;
  partId: number;
  partNumber: string;
  state: LotState;
  barredReason: string | null;
  onHand: number;
  receivedAt: Date;
}

const columns = {
  id: lots.id,
  number: lots.number,
  partId: lots.partId,
  state: lots.state,
  barredReason: lots.barredReason,
  onHand: lots.onHand,
  receivedAt: lots.receivedAt,
};

/**
 * Locks a lot by its number as scanned or typed, so that nobody else moves of it until the commit.
 *
 * @param field the form's field that the number came from
 * @throws DomainError `not_found`
 */
export async function lockLot(tx: Tx, scanned: string, field = 'lot'): Promise<LockedLot> {
  const number = normaliseScan(scanned);
  const [lot] = await tx.select(columns).from(lots).where(eq(lots.number, number)).for('update');
  if (lot === undefined) {
    const sentence = `There is no lot ${number}. Scan the label again, or look the part up in the stores.`;
    throw new DomainError('not_found', sentence, { [field]: sentence });
  }
  const [part] = await tx.select({ number: parts.number }).from(parts).where(eq(parts.id, lot.partId));
  return { ...lot, partNumber: part?.number ?? '' };
}
