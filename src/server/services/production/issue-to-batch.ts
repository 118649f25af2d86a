import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import { needOfBatch } from '~/domain/production/kit';
import { chooseLots } from '~/domain/stores/lots';
import { groupBy } from '~/lib/group-by';
import { batches, holds, lots, picks, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readBomLines } from '~/server/queries/production/read-bom';
import type { LineOfPart } from '~/server/queries/production/read-bom';
import { readIssued, resolvedOrRefused } from '~/server/queries/production/read-kit';
import { moveStock } from '~/server/services/stores/move-stock';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';

export interface Shortage {
  partNumber: string;
  wanted: number;
  available: number;
}

export interface BatchIssue {
  batchNumber: number;
  /** Parts of which something was issued. */
  partCount: number;
  quantity: number;
  shortages: Shortage[];
}

interface Wanted {
  line: LineOfPart;
  quantity: number;
}

/**
 * Issues to a batch, in one step, what its units so far still need of the parts that are traced by batch:
 * by their BOM as their options resolve it, with the scrap allowance, from usable lots, oldest first.
 * Where the stores are short nothing is taken unless that is asked for.
 *
 * @throws DomainError `not_found`, or `conflict` where the stores are short, a hold is on the batch, or
 * nothing is left to issue
 */
export async function issueToBatch(
  input: { batchNumber: number; evenIfShort?: boolean },
  ctx: Ctx,
): Promise<BatchIssue> {
  return write(ctx, async (w) => {
    const [batch] = await w.tx
      .select({ id: batches.id, number: batches.number })
      .from(batches)
      .where(eq(batches.number, input.batchNumber))
      .for('update');
    if (batch === undefined) throw new DomainError('not_found', `There is no batch ${input.batchNumber}.`);
    await refuseHeldBatch(w, batch.id);
    const wanted = await wantedBy(w, batch.id);
    if (wanted.length === 0) {
      throw new DomainError('conflict', `All that the units of batch ${batch.number} need has been issued.`);
    }
    const stock = await lockStock(
      w,
      wanted.map(({ line }) => line.partId),
    );
    const shortages = shortagesOf(wanted, stock);
    if (shortages.length > 0 && input.evenIfShort !== true) throw tooShort(shortages);
    const issued = await take(w, batch, wanted, stock);
    if (issued.picks === 0) throw tooShort(shortages);
    await w.record({
      action: 'batch.issue',
      subjects: [
        { type: 'batch', id: batch.id },
        ...[...issued.lotIds].map((id) => ({ type: 'lot' as const, id })),
      ],
      details: { batch: batch.number, parts: issued.parts.size, quantity: issued.quantity, shortages },
    });
    return { batchNumber: batch.number, partCount: issued.parts.size, quantity: issued.quantity, shortages };
  });
}

async function refuseHeldBatch(w: WriteContext, batchId: number): Promise<void> {
  const [hold] = await w.tx
    .select({ reason: holds.reason })
    .from(holds)
    .where(and(eq(holds.subjectType, 'batch'), eq(holds.subjectId, batchId), isNull(holds.endedAt)));
  if (hold !== undefined) throw new DomainError('conflict', `The batch is on hold: ${hold.reason}`);
}

/** What is still to be issued, by line, over all units of the batch. */
async function wantedBy(w: WriteContext, batchId: number): Promise<Wanted[]> {
  const ofBatch = await w.tx
    .select({ bomRevisionId: units.bomRevisionId, options: units.options })
    .from(units)
    .where(eq(units.batchId, batchId));
  const issued = await readIssued(w.tx, batchId);
  const revisions = new Set(ofBatch.flatMap((unit) => unit.bomRevisionId ?? []));
  const wanted: Wanted[] = [];
  for (const revisionId of revisions) {
    const bom = await readBomLines(w.tx, revisionId);
    const byId = new Map(bom.map((line) => [line.id, line]));
    const resolved = ofBatch
      .filter((unit) => unit.bomRevisionId === revisionId)
      .map((unit) => resolvedOrRefused(bom, unit.options));
    for (const [lineId, need] of needOfBatch(resolved, (id) => byId.get(id)?.scrapPercent ?? 0)) {
      const line = byId.get(lineId);
      const quantity = need - (issued.get(lineId) ?? 0);
      if (line?.trace === 'batch' && quantity > 0) wanted.push({ line, quantity });
    }
  }
  return wanted;
}

/** The lots to take from, under their locks, by part. */
async function lockStock(w: WriteContext, partIds: readonly number[]) {
  const held = w.tx
    .select({ id: holds.subjectId })
    .from(holds)
    .where(and(eq(holds.subjectType, 'lot'), isNull(holds.endedAt)));
  const heldIds = new Set((await held).map(({ id }) => id));
  const rows = await w.tx
    .select()
    .from(lots)
    .where(and(inArray(lots.partId, [...new Set(partIds)]), eq(lots.state, 'usable')))
    .orderBy(asc(lots.id))
    .for('update');
  return groupBy(
    rows.filter((lot) => !heldIds.has(lot.id)),
    (lot) => lot.partId,
  );
}

type Stock = Awaited<ReturnType<typeof lockStock>>;

function shortagesOf(wanted: readonly Wanted[], stock: Stock): Shortage[] {
  const byPart = groupBy(wanted, ({ line }) => line.partId);
  return [...byPart].flatMap(([partId, lines]) => {
    const needed = lines.reduce((sum, { quantity }) => sum + quantity, 0);
    const available = (stock.get(partId) ?? []).reduce((sum, lot) => sum + lot.onHand, 0);
    const partNumber = lines[0]?.line.partNumber ?? '';
    return available < needed ? [{ partNumber, wanted: needed, available }] : [];
  });
}

function tooShort(shortages: readonly Shortage[]): DomainError {
  const some = shortages
    .slice(0, 8)
    .map((one) => `${one.partNumber} (${one.wanted} wanted, ${one.available} there)`);
  const more = shortages.length > some.length ? ` and ${shortages.length - some.length} more` : '';
  const sentence = `The stores are short of ${some.join(', ')}${more}. Nothing was issued.`;
  return new DomainError('conflict', sentence, { evenIfShort: sentence });
}

async function take(
  w: WriteContext,
  batch: { id: number; number: number },
  wanted: readonly Wanted[],
  stock: Stock,
) {
  const issued = { picks: 0, quantity: 0, parts: new Set<number>(), lotIds: new Set<number>() };
  for (const { line, quantity } of wanted) {
    const ofPart = stock.get(line.partId) ?? [];
    const there = ofPart.reduce((sum, lot) => sum + lot.onHand, 0);
    if (there === 0) continue;
    const chosen = chooseLots(ofPart, Math.min(quantity, there));
    if (!chosen.ok) throw new DomainError('conflict', `${line.partNumber}: ${chosen.reason}`);
    for (const share of chosen.picks) {
      const lot = ofPart.find(({ id }) => id === share.lotId);
      if (lot === undefined) continue;
      const reason = `batch ${batch.number}`;
      const storeEntryId = await moveStock(w, lot, { kind: 'pick', quantity: -share.quantity, reason });
      await w.tx.insert(picks).values({
        storeEntryId,
        lotId: lot.id,
        batchId: batch.id,
        bomLineId: line.id,
        quantity: share.quantity,
        designators: line.designators,
        at: w.now,
        byUserId: actingUserId(w),
      });
      issued.picks += 1;
      issued.quantity += share.quantity;
      issued.parts.add(line.partId);
      issued.lotIds.add(lot.id);
    }
  }
  return issued;
}
