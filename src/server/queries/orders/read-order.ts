import { and, asc, desc, eq, gt } from 'drizzle-orm';
import { balanceDueMinor, orderCan } from '~/domain/orders/status';
import type { OrderState } from '~/domain/orders/status';
import type { Reader } from '~/server/db/client';
import {
  batches,
  checkouts,
  contacts,
  models,
  orderLines,
  orders,
  payments,
  placeHolds,
  refunds,
} from '~/server/db/schema';
import { listOrderUnits } from './list-order-units';
import type { OrderUnit } from './list-order-units';
import { sumPayments } from './sum-payments';

/** An order with all that hangs from it. */
export interface OrderView {
  id: number;
  number: number;
  buyerUserId: number | null;
  state: OrderState;
  currency: string;
  totalMinor: number;
  dueNowMinor: number;
  paidMinor: number;
  refundedMinor: number;
  balanceMinor: number;
  /** The owner's estimate it was sold with. */
  promisedOn: string | null;
  /** The owner's estimate now, where it has moved since. */
  estimatedOn: string | null;
  placedAt: Date;
  paidAt: Date | null;
  contact: {
    name: string;
    email: string;
    callSign: string | null;
    phone: string | null;
    addressLines: string[];
    city: string;
    region: string;
    postcode: string;
    country: string;
  };
  lines: {
    kind: 'rig' | 'spare' | 'carriage';
    description: string;
    options: string[];
    quantity: number;
    totalMinor: number;
    slug: string | null;
    batchNumber: number | null;
  }[];
  /** Until when the place is kept for whoever is paying; null where nothing is held any more. */
  heldUntil: Date | null;
  payments: { kind: 'card' | 'transfer' | 'cash'; amountMinor: number; paidAt: Date }[];
  refunds: { amountMinor: number; reason: string; state: 'wanted' | 'done' | 'refused'; createdAt: Date }[];
  /** The provider's page that is open now. */
  paymentUrl: string | null;
  /** What is paid there. */
  openCheckoutMinor: number | null;
  /** Whether a payment page may be asked for now. */
  isPayable: boolean;
  units: OrderUnit[];
}

type Whose = { id: number } | { number: number };

/** An order by its id or its number; null where there is none. */
export async function readOrder(reader: Reader, whose: Whose, now: Date): Promise<OrderView | null> {
  const one = 'id' in whose ? eq(orders.id, whose.id) : eq(orders.number, whose.number);
  const [found] = await reader
    .select({ order: orders, contact: contacts })
    .from(orders)
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .where(one);
  if (found === undefined) return null;
  const { order, contact } = found;
  const lines = await reader
    .select({
      kind: orderLines.kind,
      description: orderLines.description,
      options: orderLines.options,
      quantity: orderLines.quantity,
      totalMinor: orderLines.totalMinor,
      slug: models.slug,
      batchNumber: batches.number,
      estimatedOn: batches.estimatedOn,
      holdState: placeHolds.state,
      heldUntil: placeHolds.heldUntil,
    })
    .from(orderLines)
    .leftJoin(models, eq(models.id, orderLines.modelId))
    .leftJoin(batches, eq(batches.id, orderLines.batchId))
    .leftJoin(placeHolds, eq(placeHolds.orderLineId, orderLines.id))
    .where(eq(orderLines.orderId, order.id))
    .orderBy(asc(orderLines.lineNo));
  const sums = await sumPayments(reader, order.id);
  const paid = await reader
    .select({ kind: payments.kind, amountMinor: payments.amountMinor, paidAt: payments.paidAt })
    .from(payments)
    .where(eq(payments.orderId, order.id))
    .orderBy(asc(payments.id));
  const sentBack = await reader
    .select({
      amountMinor: refunds.amountMinor,
      reason: refunds.reason,
      state: refunds.state,
      createdAt: refunds.createdAt,
    })
    .from(refunds)
    .innerJoin(payments, eq(payments.id, refunds.paymentId))
    .where(eq(payments.orderId, order.id))
    .orderBy(asc(refunds.id));
  const [checkout] = await reader
    .select({ url: checkouts.url, amountMinor: checkouts.amountMinor })
    .from(checkouts)
    .where(and(eq(checkouts.orderId, order.id), eq(checkouts.state, 'open'), gt(checkouts.expiresAt, now)))
    .orderBy(desc(checkouts.id))
    .limit(1);
  const held = lines.flatMap(({ holdState, heldUntil }) =>
    holdState === 'held' && heldUntil ? [heldUntil] : [],
  );
  const balanceMinor = balanceDueMinor({ ...order, ...sums });
  return {
    id: order.id,
    number: order.number,
    buyerUserId: order.buyerUserId,
    state: order.state,
    currency: order.currency,
    totalMinor: order.totalMinor,
    dueNowMinor: order.dueNowMinor,
    ...sums,
    balanceMinor,
    promisedOn: order.promisedOn,
    estimatedOn: lines.find(({ estimatedOn }) => estimatedOn !== null)?.estimatedOn ?? null,
    placedAt: order.placedAt,
    paidAt: order.paidAt,
    contact,
    lines: lines.map(({ kind, description, options, quantity, totalMinor, slug, batchNumber }) => ({
      kind,
      description,
      options: options.map(({ label }) => label),
      quantity,
      totalMinor,
      slug,
      batchNumber,
    })),
    heldUntil: held[0] ?? null,
    payments: paid,
    refunds: sentBack,
    paymentUrl: checkout?.url ?? null,
    openCheckoutMinor: checkout?.amountMinor ?? null,
    isPayable:
      (orderCan.pay(order.state).ok && held.length > 0) ||
      (orderCan.payBalance(order.state).ok && balanceMinor > 0),
    units: await listOrderUnits(reader, order.id),
  };
}
