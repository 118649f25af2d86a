import { and, asc, eq, gt, inArray, isNotNull, lte } from 'drizzle-orm';
import { checkouts, payments, providerEvents } from '~/server/db/schema';
import type { CallContext } from '~/server/write';
import { checkoutIdOf, checkoutReference } from './checkout-reference';
import type { PaymentFact } from './payment-fact';

/** A request that is still under way opens its checkout itself. */
const underWayMs = 20_000;
/** The provider's page must end 30 minutes ahead at least and ends 31 after the start: later it is refused. */
const openableMs = 50_000;

/** Checkouts that were just written but not opened: the process ended, or the provider did not answer. */
export async function listUnopenedCheckouts(ctx: CallContext): Promise<number[]> {
  const rows = await ctx.db
    .select({ id: checkouts.id })
    .from(checkouts)
    .where(
      and(
        eq(checkouts.state, 'wanted'),
        lte(checkouts.createdAt, new Date(ctx.now.getTime() - underWayMs)),
        gt(checkouts.createdAt, new Date(ctx.now.getTime() - openableMs)),
      ),
    )
    .orderBy(asc(checkouts.id))
    .limit(50);
  return rows.map(({ id }) => id);
}

/** Open checkouts whose page has ended without a word from the provider. */
export async function listSilentCheckouts(ctx: CallContext): Promise<{ id: number; sessionId: string }[]> {
  const rows = await ctx.db
    .select({ id: checkouts.id, sessionId: checkouts.providerSessionId })
    .from(checkouts)
    .where(
      and(
        inArray(checkouts.state, ['open', 'wanted']),
        isNotNull(checkouts.providerSessionId),
        lte(checkouts.expiresAt, ctx.now),
      ),
    )
    .orderBy(asc(checkouts.id))
    .limit(50);
  return rows.flatMap(({ id, sessionId }) => (sessionId === null ? [] : [{ id, sessionId }]));
}

/** Events that are kept and not applied yet, oldest first. */
export async function listKeptEvents(ctx: CallContext): Promise<{ id: number; body: string }[]> {
  return ctx.db
    .select({ id: providerEvents.id, body: providerEvents.body })
    .from(providerEvents)
    .where(eq(providerEvents.state, 'kept'))
    .orderBy(asc(providerEvents.receivedAt), asc(providerEvents.id))
    .limit(200);
}

/** Whether what a kept event speaks of has become known, so that applying it is worth a try. */
export async function isAboutKnownThing(fact: PaymentFact, ctx: CallContext): Promise<boolean> {
  if (fact.kind === 'unknown') return true;
  if ('checkoutId' in fact) {
    const id = checkoutIdOf(fact.checkoutId);
    if (id === null) return false;
    const [row] = await ctx.db
      .select({ createdAt: checkouts.createdAt })
      .from(checkouts)
      .where(eq(checkouts.id, id));
    return row !== undefined && checkoutReference({ id, createdAt: row.createdAt }) === fact.checkoutId;
  }
  const [row] = await ctx.db
    .select({ id: payments.id })
    .from(payments)
    .where(eq(payments.providerReference, fact.paymentIntentId));
  return row !== undefined;
}
