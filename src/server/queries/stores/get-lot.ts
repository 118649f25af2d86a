import { and, asc, desc, eq, inArray, isNull } from 'drizzle-orm';
import { resolveBom } from '~/domain/planning/resolve-bom';
import type { UnitStage } from '~/domain/production/stages';
import { normaliseScan } from '~/lib/serials';
import type { Reader } from '~/server/db/client';
import {
  batches,
  bins,
  contacts,
  lots,
  models,
  orderLines,
  orders,
  parts,
  picks,
  storeEntries,
  suppliers,
  units,
  userProfiles,
} from '~/server/db/schema';
import { readBomLines } from '~/server/queries/production/read-bom';
import { lotColumns } from './lot-columns';

/** A unit that a lot went into. */
export interface UnitOfLot {
  serial: string;
  model: string;
  stage: UnitStage;
  /** Scanned into the unit; null where it came by the batch and any of the issued pieces may be in it. */
  quantity: number | null;
  designators: string[];
  batchNumber: number | null;
  orderNumber: number | null;
  /** For those who may see it; the page asks. */
  callSign: string | null;
}

/** A lot with its part and its ledger; null where there is none. */
export async function getLot(reader: Reader, scanned: string) {
  const [lot] = await reader
    .select({
      id: lots.id,
      ...lotColumns,
      partNumber: parts.number,
      partDescription: parts.description,
      partUnit: parts.unit,
      trace: parts.trace,
    })
    .from(lots)
    .innerJoin(parts, eq(parts.id, lots.partId))
    .leftJoin(suppliers, eq(suppliers.id, lots.supplierId))
    .leftJoin(bins, eq(bins.id, lots.binId))
    .where(eq(lots.number, normaliseScan(scanned)));
  if (lot === undefined) return null;
  const [entries, inUnits] = await Promise.all([
    reader
      .select({
        id: storeEntries.id,
        kind: storeEntries.kind,
        quantity: storeEntries.quantity,
        reason: storeEntries.reason,
        reversesId: storeEntries.reversesId,
        at: storeEntries.at,
        by: userProfiles.name,
      })
      .from(storeEntries)
      .leftJoin(userProfiles, eq(userProfiles.userId, storeEntries.byUserId))
      .where(eq(storeEntries.lotId, lot.id))
      .orderBy(desc(storeEntries.id)),
    listUnitsOfLot(reader, lot.id),
  ]);
  const reversed = new Set(entries.map(({ reversesId }) => reversesId));
  return {
    lot,
    entries: entries.map((entry) => ({
      ...entry,
      mayBeReversed: entry.reversesId === null && !reversed.has(entry.id),
    })),
    units: inUnits,
  };
}

/**
 * Every unit that parts of a lot are in: those it was scanned into, and, for what was issued to a batch,
 * every unit of that batch whose options call for the line.
 */
export async function listUnitsOfLot(reader: Reader, lotId: number): Promise<UnitOfLot[]> {
  const remaining = await reader
    .select({
      unitId: picks.unitId,
      batchId: picks.batchId,
      lineId: picks.bomLineId,
      quantity: picks.quantity,
      designators: picks.designators,
    })
    .from(picks)
    .where(and(eq(picks.lotId, lotId), isNull(picks.undoneByEntryId)));
  const found = new Map<number, { quantity: number | null; designators: string[] }>();
  for (const { unitId, quantity, designators } of remaining) {
    if (unitId === null) continue;
    const known = found.get(unitId);
    found.set(unitId, {
      quantity: (known?.quantity ?? 0) + quantity,
      designators: [...(known?.designators ?? []), ...designators],
    });
  }
  const byBatch = remaining.flatMap(({ batchId, lineId }) =>
    batchId === null || lineId === null ? [] : [{ batchId, lineId }],
  );
  for (const { unitId, designators } of await unitsByBatch(reader, byBatch)) {
    if (!found.has(unitId)) found.set(unitId, { quantity: null, designators });
  }
  if (found.size === 0) return [];
  const rows = await reader
    .select({
      id: units.id,
      serial: units.serial,
      model: models.name,
      stage: units.stage,
      batchNumber: batches.number,
      orderNumber: orders.number,
      callSign: contacts.callSign,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(contacts, eq(contacts.id, orders.contactId))
    .where(inArray(units.id, [...found.keys()]))
    .orderBy(asc(units.serial));
  return rows.map(({ id, ...row }) => ({
    ...row,
    ...(found.get(id) ?? { quantity: null, designators: [] }),
  }));
}

async function unitsByBatch(
  reader: Reader,
  issued: readonly { batchId: number; lineId: number }[],
): Promise<{ unitId: number; designators: string[] }[]> {
  if (issued.length === 0) return [];
  const ofBatches = await reader
    .select({
      id: units.id,
      batchId: units.batchId,
      bomRevisionId: units.bomRevisionId,
      options: units.options,
    })
    .from(units)
    .where(inArray(units.batchId, [...new Set(issued.map(({ batchId }) => batchId))]));
  const boms = new Map<number, Awaited<ReturnType<typeof readBomLines>>>();
  for (const revisionId of new Set(ofBatches.flatMap((unit) => unit.bomRevisionId ?? []))) {
    boms.set(revisionId, await readBomLines(reader, revisionId));
  }
  return ofBatches.flatMap((unit) => {
    const resolved = resolveBom(boms.get(unit.bomRevisionId ?? 0) ?? [], new Set(unit.options));
    const lines = resolved.ok ? resolved.lines : [];
    const inIt = lines.filter((line) =>
      issued.some(({ batchId, lineId }) => batchId === unit.batchId && lineId === line.lineId),
    );
    return inIt.length === 0
      ? []
      : [{ unitId: unit.id, designators: inIt.flatMap((line) => line.designators) }];
  });
}
