import { eq } from 'drizzle-orm';
import { unitCan } from '~/domain/production/unit-status';
import { lots, picks } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { lockLot } from '~/server/services/stores/lock-lot';
import { reverseMove } from '~/server/services/stores/reverse-move';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockUnit, mustBeAllowed } from './lock-unit';

/**
 * Puts a pick of a unit back into its lot: another store entry reverses the first, and both stay.
 *
 * @throws DomainError `not_found`, or `conflict` where it was put back before or the kit is finished
 */
export async function undoPick(
  input: { serial: string; pickId: number; reason?: string | undefined },
  ctx: Ctx,
): Promise<{ serial: string; lot: string; quantity: number }> {
  return write(ctx, async (w) => {
    const { row: unit, facts } = await lockUnit(w.tx, input.serial);
    mustBeAllowed(unit.serial, unitCan.pick(facts));
    const [pick] = await w.tx
      .select({ unitId: picks.unitId, entryId: picks.storeEntryId, lotNumber: lots.number })
      .from(picks)
      .innerJoin(lots, eq(lots.id, picks.lotId))
      .where(eq(picks.id, input.pickId));
    if (pick?.unitId !== unit.id) throw new DomainError('not_found', `${unit.serial} has no such pick.`);
    const lot = await lockLot(w.tx, pick.lotNumber);
    const reason = input.reason ?? `put back from ${unit.serial}`;
    const { quantity } = await reverseMove(w, lot, pick.entryId, reason);
    await w.record({
      action: 'kit.undo_pick',
      subjects: [
        { type: 'unit', id: unit.id },
        { type: 'lot', id: lot.id },
      ],
      details: { lot: lot.number, part: lot.partNumber, quantity, reason },
    });
    return { serial: unit.serial, lot: lot.number, quantity };
  });
}
