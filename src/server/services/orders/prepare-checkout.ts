import { asc, eq } from 'drizzle-orm';
import { formatMoney } from '~/domain/money/format-money';
import { linkToken } from '~/server/auth/tokens';
import { checkouts, contacts, orderLines, orders } from '~/server/db/schema';
import { env } from '~/server/env';
import { DomainError } from '~/server/errors';
import type { CallContext } from '~/server/write';
import { checkoutReference } from './checkout-reference';

/** What the payment provider is to be told of a checkout. */
export interface PreparedCheckout {
  orderNumber: number;
  /** Of the buyer's own page. */
  token: string;
  reference: string;
  currency: string;
  lines: { name: string; amountMinor: number }[];
  email: string;
  expiresAt: Date;
  /** The provider's page where it is open already. */
  url: string | null;
  sessionId: string | null;
}

/**
 * Reads what a checkout needs to be opened at the provider. It reads the same at every repetition, as the
 * idempotency key demands.
 *
 * @throws DomainError `not_found`
 */
export async function prepareCheckout(checkoutId: number, ctx: CallContext): Promise<PreparedCheckout> {
  const [found] = await ctx.db
    .select({ checkout: checkouts, order: orders, email: contacts.email })
    .from(checkouts)
    .innerJoin(orders, eq(orders.id, checkouts.orderId))
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .where(eq(checkouts.id, checkoutId));
  if (found === undefined) throw new DomainError('not_found', 'There is no such checkout.');
  const { checkout, order, email } = found;
  const lines = await ctx.db
    .select({
      name: orderLines.description,
      quantity: orderLines.quantity,
      amountMinor: orderLines.totalMinor,
    })
    .from(orderLines)
    .where(eq(orderLines.orderId, order.id))
    .orderBy(asc(orderLines.lineNo));
  const named = lines.map(({ name, quantity, amountMinor }) => ({
    name: quantity === 1 ? name : `${name}, ${quantity} pieces`,
    amountMinor,
  }));
  const total = formatMoney({ minor: order.totalMinor, currency: order.currency });
  const part = {
    name: `${checkout.purpose === 'order' ? 'Deposit' : 'Balance'} for ${named.map(({ name }) => name).join(', ')} (${total} in all)`,
    amountMinor: checkout.amountMinor,
  };
  const isWhole = checkout.purpose === 'order' && checkout.amountMinor === order.totalMinor;
  return {
    orderNumber: order.number,
    token: linkToken(env().secret, 'order', order.id),
    reference: checkoutReference(checkout),
    currency: order.currency,
    lines: isWhole ? named : [part],
    email,
    expiresAt: checkout.expiresAt,
    url: checkout.url,
    sessionId: checkout.providerSessionId,
  };
}
