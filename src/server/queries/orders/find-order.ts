import { createHash } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { orders } from '~/server/db/schema';

/** A buyer's own order; null where it is another's or there is none. */
export async function findOwnOrder(
  reader: Reader,
  number: number,
  buyerUserId: number,
): Promise<{ id: number } | null> {
  const [row] = await reader
    .select({ id: orders.id })
    .from(orders)
    .where(and(eq(orders.number, number), eq(orders.buyerUserId, buyerUserId)));
  return row ?? null;
}

/** The order that the token of a secret link opens; only the token's hash is kept. */
export async function findOrderByToken(reader: Reader, token: string): Promise<{ id: number } | null> {
  const [row] = await reader
    .select({ id: orders.id })
    .from(orders)
    .where(eq(orders.linkHash, createHash('sha256').update(token).digest('hex')));
  return row ?? null;
}
