import { eq } from 'drizzle-orm';
import type { Db } from '~/server/db/client';
import { batches, orders } from '~/server/db/schema';

/** The batch, where there is only one. */
export async function readBatch(db: Db) {
  const [row] = await db.select().from(batches);
  if (row === undefined) throw new Error('There is no batch.');
  return row;
}

export async function readOrder(db: Db, id: number) {
  const [row] = await db.select().from(orders).where(eq(orders.id, id));
  if (row === undefined) throw new Error('There is no order.');
  return row;
}
