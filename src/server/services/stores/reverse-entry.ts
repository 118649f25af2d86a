import { eq } from 'drizzle-orm';
import { isPast } from '~/domain/production/stages';
import { unitCan } from '~/domain/production/unit-status';
import { picks, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { lockUnit, mustBeAllowed } from '~/server/services/production/lock-unit';
import { write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { lockLot } from './lock-lot';
import { reverseMove } from './reverse-move';

/**
 * Takes back one line of a lot's ledger by another line that says why.
 *
 * @throws DomainError `not_found`, or `conflict` where it was reversed before, is a reversal, would leave
 * less than none, or is a pick that can no longer be put back
 */
export async function reverseEntry(
  input: { lot: string; entryId: number; reason: string },
  ctx: Ctx,
): Promise<{ reversalId: number; lot: string; quantity: number; onHand: number }> {
  return write(ctx, async (w) => {
    // The unit or batch is locked before the lot, as everywhere, so that two people wait rather than deadlock.
    const subjects = await lockWhatItWasPickedFor(w, input.entryId);
    const lot = await lockLot(w.tx, input.lot);
    const { reversalId, quantity } = await reverseMove(w, lot, input.entryId, input.reason);
    await w.record({
      action: 'lot.reverse_entry',
      subjects: [{ type: 'lot', id: lot.id }, { type: 'part', id: lot.partId }, ...subjects],
      details: { lot: lot.number, entryId: input.entryId, quantity, reason: input.reason },
    });
    return { reversalId, lot: lot.number, quantity, onHand: lot.onHand };
  });
}

async function lockWhatItWasPickedFor(w: WriteContext, entryId: number) {
  const [pick] = await w.tx
    .select({ batchId: picks.batchId, serial: units.serial })
    .from(picks)
    .leftJoin(units, eq(units.id, picks.unitId))
    .where(eq(picks.storeEntryId, entryId));
  if (pick === undefined) return [];
  if (pick.serial !== null) {
    const { row, facts } = await lockUnit(w.tx, pick.serial);
    mustBeAllowed(row.serial, unitCan.pick(facts));
    return [{ type: 'unit' as const, id: row.id }];
  }
  if (pick.batchId === null) return [];
  const ofBatch = await w.tx
    .select({ stage: units.stage })
    .from(units)
    .where(eq(units.batchId, pick.batchId))
    .for('update');
  if (ofBatch.some(({ stage }) => isPast('kit', stage))) {
    throw new DomainError('conflict', 'Kits of this batch are finished with it; count the lot instead.');
  }
  return [{ type: 'batch' as const, id: pick.batchId }];
}
