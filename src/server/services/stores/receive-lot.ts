import { eq } from 'drizzle-orm';
import { parseMoney } from '~/domain/money/parse-money';
import type { Receipt } from '~/schemas/stores-lots';
import type { Tx } from '~/server/db/client';
import { bins, lots, parts, suppliers, works } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { nextNumber, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { moveStock } from './move-stock';

/**
 * Books a receipt of a part as a new lot, numbered from the series `lot`, with its first store entry.
 * Supplier and bin are entered when they are named for the first time.
 *
 * @throws DomainError `not_found` where there is no such part
 */
export async function receiveLot(
  input: Receipt,
  ctx: Ctx,
): Promise<{ lotId: number; number: string; partNumber: string; quantity: number }> {
  return write(ctx, async (w) => {
    const [part] = await w.tx
      .select({ id: parts.id, number: parts.number })
      .from(parts)
      .where(eq(parts.number, input.part));
    if (part === undefined) {
      const sentence = `There is no part ${input.part}. Enter it under Stores first.`;
      throw new DomainError('not_found', sentence, { part: sentence });
    }
    const number = `L-${await nextNumber(w.tx, 'lot')}`;
    const [inserted] = await w.tx.insert(lots).values({
      number,
      partId: part.id,
      supplierId: input.supplier === undefined ? null : await supplierId(w.tx, input.supplier),
      binId: input.bin === undefined ? null : await binId(w.tx, input.bin),
      dateCode: input.dateCode ?? '',
      state: input.state,
      quantityReceived: input.quantity,
      onHand: 0,
      ...(await costOf(w.tx, input)),
      receivedAt: w.now,
    });
    const lot = { id: inserted.insertId, number, onHand: 0 };
    await moveStock(w, lot, { kind: 'receipt', quantity: input.quantity });
    await w.record({
      action: 'lot.receive',
      subjects: [
        { type: 'lot', id: lot.id },
        { type: 'part', id: part.id },
      ],
      details: { lot: number, part: part.number, quantity: input.quantity, state: input.state },
    });
    return { lotId: lot.id, number, partNumber: part.number, quantity: input.quantity };
  });
}

async function supplierId(tx: Tx, name: string): Promise<number> {
  await tx.insert(suppliers).ignore().values({ name });
  const [row] = await tx.select({ id: suppliers.id }).from(suppliers).where(eq(suppliers.name, name));
  if (row === undefined) throw new Error('A supplier that was just entered was not found.');
  return row.id;
}

async function binId(tx: Tx, code: string): Promise<number> {
  await tx.insert(bins).ignore().values({ code });
  const [row] = await tx.select({ id: bins.id }).from(bins).where(eq(bins.code, code));
  if (row === undefined) throw new Error('A bin that was just entered was not found.');
  return row.id;
}

/** Of the whole lot, in whole minor units of the works' currency unless another is named. */
async function costOf(
  tx: Tx,
  input: Receipt,
): Promise<{ costMinor: number | null; currency: string | null }> {
  if (input.costMinor === undefined && input.cost === undefined) return { costMinor: null, currency: null };
  const currency = input.currency ?? (await worksCurrency(tx));
  if (input.costMinor !== undefined) return { costMinor: input.costMinor, currency };
  const read = parseMoney(input.cost ?? '', currency);
  if (!read.ok) throw new DomainError('refused', read.reason, { cost: read.reason });
  return { costMinor: read.money.minor, currency };
}

async function worksCurrency(tx: Tx): Promise<string> {
  const [row] = await tx.select({ currency: works.currency }).from(works);
  if (row === undefined)
    throw new DomainError('conflict', 'Set up the works first: a cost needs its currency.');
  return row.currency;
}
