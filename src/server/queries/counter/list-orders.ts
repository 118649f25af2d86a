import { and, desc, eq, lt, or, sql } from 'drizzle-orm';
import type { SQL } from 'drizzle-orm';
import { balanceDueMinor, orderOwes } from '~/domain/orders/status';
import type { OrderState } from '~/domain/orders/status';
import type { CounterFilter } from '~/schemas/counter-orders';
import type { Reader } from '~/server/db/client';
import { contacts, orderLines, orders, payments, refunds, units } from '~/server/db/schema';

export interface CounterOrder {
  id: number;
  number: number;
  state: OrderState;
  placedAt: Date;
  promisedOn: string | null;
  name: string;
  callSign: string | null;
  country: string;
  what: string;
  currency: string;
  totalMinor: number;
  /** What was paid less what went back. */
  keptMinor: number;
  /** What is still to be paid; nothing for an order that is cancelled. */
  owesMinor: number;
}

const paidMinor = sql<number>`(select coalesce(sum(${payments.amountMinor}), 0) from ${payments} where ${payments.orderId} = ${orders.id})`;
const refundedMinor = sql<number>`(select coalesce(sum(${refunds.amountMinor}), 0) from ${refunds} join ${payments} on ${payments.id} = ${refunds.paymentId} where ${payments.orderId} = ${orders.id} and ${refunds.state} <> 'refused')`;

/** Orders at the counter, newest first; the next page begins before the last one's id. */
export async function listCounterOrders(
  reader: Reader,
  { state, q, before, limit }: CounterFilter & { limit: number },
): Promise<CounterOrder[]> {
  const rows = await reader
    .select({
      id: orders.id,
      number: orders.number,
      state: orders.state,
      placedAt: orders.placedAt,
      promisedOn: orders.promisedOn,
      name: contacts.name,
      callSign: contacts.callSign,
      country: orders.destinationCountry,
      what: sql<string>`(select group_concat(concat(${orderLines.quantity}, ' × ', ${orderLines.description}) order by ${orderLines.lineNo} separator ', ') from ${orderLines} where ${orderLines.orderId} = ${orders.id})`,
      currency: orders.currency,
      totalMinor: orders.totalMinor,
      paidMinor: paidMinor.mapWith(Number),
      refundedMinor: refundedMinor.mapWith(Number),
    })
    .from(orders)
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .where(
      and(
        before === undefined ? undefined : lt(orders.id, before),
        state === 'all' ? undefined : inState(state),
        q === '' ? undefined : named(q),
      ),
    )
    .orderBy(desc(orders.id))
    .limit(limit);
  return rows.map((row) => ({
    ...row,
    keptMinor: row.paidMinor - row.refundedMinor,
    owesMinor: orderOwes(row.state) ? balanceDueMinor(row) : 0,
  }));
}

function inState(state: Exclude<CounterFilter['state'], 'all'>): SQL | undefined {
  if (state !== 'balance_due') return eq(orders.state, state);
  return and(eq(orders.state, 'paid'), sql`${orders.totalMinor} > ${paidMinor} - ${refundedMinor}`);
}

/** By order number, name, call sign, e-mail address or serial number. */
function named(text: string): SQL | undefined {
  const pattern = `%${text.replaceAll(/[%_\\]/g, '\\$&')}%`;
  return or(
    /^\d{1,9}$/.test(text) ? eq(orders.number, Number(text)) : undefined,
    sql`${contacts.name} like ${pattern}`,
    sql`${contacts.callSign} like ${pattern}`,
    sql`${contacts.email} like ${pattern}`,
    sql`exists (select 1 from ${units} join ${orderLines} on ${orderLines.id} = ${units.orderLineId} where ${orderLines.orderId} = ${orders.id} and ${units.serial} = ${text.toUpperCase()})`,
  );
}
