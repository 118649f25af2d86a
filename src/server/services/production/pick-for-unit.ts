import { and, eq, isNull } from 'drizzle-orm';
import { placesFor } from '~/domain/production/kit';
import { unitCan } from '~/domain/production/unit-status';
import { canPick } from '~/domain/stores/lots';
import type { Pick } from '~/schemas/production-floor';
import { holds, picks } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readKit } from '~/server/queries/production/read-kit';
import type { KitLine } from '~/server/queries/production/read-kit';
import { readAlternates } from '~/server/queries/stores/read-alternates';
import { lockLot } from '~/server/services/stores/lock-lot';
import type { LockedLot } from '~/server/services/stores/lock-lot';
import { moveStock } from '~/server/services/stores/move-stock';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { lockUnit, mustBeAllowed } from './lock-unit';

export interface Picked {
  pickId: number;
  serial: string;
  lot: string;
  partNumber: string;
  quantity: number;
  designators: string[];
}

/**
 * Takes a part from the lot that was scanned for the line of the unit's kit that asks for it. Without a
 * quantity: what the line still lacks, or what the lot has if that is less. An approved alternate is taken
 * only with a reason.
 *
 * @throws DomainError `not_found` (unit, lot), `refused` (wrong part, alternate without a reason),
 * `conflict` (barred or waiting lot, too little left, kit finished, a hold)
 */
export async function pickForUnit(input: Pick & { serial: string }, ctx: Ctx): Promise<Picked> {
  return write(ctx, async (w) => {
    const { row: unit, facts } = await lockUnit(w.tx, input.serial);
    mustBeAllowed(unit.serial, unitCan.pick(facts));
    const lot = await lockLot(w.tx, input.lot);
    await refuseHeldLot(w, lot);
    const kit = await readKit(w.tx, unit);
    const line = await lineFor(w, unit, kit, lot, input);
    const wanted = input.quantity ?? Math.max(1, Math.min(line.missing, lot.onHand));
    const allowed = canPick(lot, wanted);
    if (!allowed.ok) refuse('conflict', 'lot', reasonWithBar(allowed.reason, lot));
    if (wanted > line.missing) {
      refuse(
        'refused',
        'quantity',
        `The kit lacks ${line.missing} of ${line.part.partNumber}, not ${wanted}.`,
      );
    }
    const storeEntryId = await moveStock(w, lot, { kind: 'pick', quantity: -wanted, reason: unit.serial });
    const designators = placesFor(line, line.openPlaces, wanted);
    const isAlternate = line.partId !== lot.partId;
    const [pick] = await w.tx.insert(picks).values({
      storeEntryId,
      lotId: lot.id,
      unitId: unit.id,
      bomLineId: line.lineId,
      quantity: wanted,
      designators,
      alternateReason: isAlternate ? (input.alternateReason ?? null) : null,
      at: w.now,
      byUserId: actingUserId(w),
    });
    await w.record({
      action: 'kit.pick',
      subjects: [
        { type: 'unit', id: unit.id },
        { type: 'lot', id: lot.id },
      ],
      details: {
        ...{ lot: lot.number, part: lot.partNumber, quantity: wanted, designators },
        ...(isAlternate ? { inPlaceOf: line.part.partNumber, reason: input.alternateReason } : {}),
      },
    });
    const { serial } = unit;
    const { number, partNumber } = lot;
    return { pickId: pick.insertId, serial, lot: number, partNumber, quantity: wanted, designators };
  });
}

/** The line that the lot is for: of its own part, or of one that its part is approved in place of. */
async function lineFor(
  w: WriteContext,
  unit: { serial: string; modelId: number },
  kit: readonly KitLine[],
  lot: LockedLot,
  input: Pick,
): Promise<KitLine> {
  const lines = input.lineId === undefined ? kit : kit.filter((line) => line.lineId === input.lineId);
  const own = lines.filter((line) => line.partId === lot.partId);
  const open = own.find((line) => line.missing > 0);
  if (open !== undefined) return open;
  const approved = (await readAlternates(w.tx, unit.modelId)).filter(
    (one) => one.alternatePartId === lot.partId,
  );
  const instead = lines.filter((line) => approved.some((one) => one.partId === line.partId));
  const openInstead = instead.find((line) => line.missing > 0);
  if (openInstead !== undefined) {
    const { partNumber } = openInstead.part;
    if (input.alternateReason !== undefined) return openInstead;
    refuse(
      'refused',
      'alternateReason',
      `${lot.partNumber} is approved in place of ${partNumber}. Say why it is taken, and pick again.`,
    );
  }
  if (own.length > 0 || instead.length > 0) {
    const number = own[0]?.part.partNumber ?? instead[0]?.part.partNumber ?? lot.partNumber;
    refuse('conflict', 'lot', `All of ${number} is picked already; ${lot.number} was left where it is.`);
  }
  const wanted = input.lineId === undefined ? undefined : lines[0]?.part.partNumber;
  const instruction = wanted === undefined ? '' : ` This line wants ${wanted}.`;
  refuse(
    'refused',
    'lot',
    `Lot ${lot.number} is ${lot.partNumber}, which is not in the kit of ${unit.serial}.${instruction}`,
  );
}

async function refuseHeldLot(w: WriteContext, lot: LockedLot): Promise<void> {
  const [hold] = await w.tx
    .select({ reason: holds.reason })
    .from(holds)
    .where(and(eq(holds.subjectType, 'lot'), eq(holds.subjectId, lot.id), isNull(holds.endedAt)));
  if (hold !== undefined) refuse('conflict', 'lot', `Lot ${lot.number} is on hold: ${hold.reason}`);
}

function reasonWithBar(reason: string, lot: LockedLot): string {
  return lot.barredReason === null ? reason : `${reason} ${lot.barredReason}`;
}

function refuse(code: 'conflict' | 'refused', field: string, sentence: string): never {
  throw new DomainError(code, sentence, { [field]: sentence });
}
