import type { Reader } from '~/server/db/client';
import { listChanges } from '~/server/queries/office/list-changes';
import { readOrder } from '~/server/queries/orders/read-order';
import { listOrderMail } from './list-order-mail';
import { readBalance } from './read-balance';

/** All that happened to an order, for its page at the counter; null where there is none. */
export async function readCounterOrder(reader: Reader, number: number, now: Date) {
  const order = await readOrder(reader, { number }, now);
  if (order === null) return null;
  const [balance, mail, changes] = await Promise.all([
    readBalance(reader, { id: order.id }),
    listOrderMail(reader, order.id),
    listChanges(reader, { subject: { type: 'order', id: order.id }, limit: 100 }),
  ]);
  return { order, unitsPassed: balance?.unitsPassed ?? 0, mail, changes };
}
