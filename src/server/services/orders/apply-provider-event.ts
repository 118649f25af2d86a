import { eq } from 'drizzle-orm';
import { providerEvents } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx, WriteContext } from '~/server/write';
import { write } from '~/server/write';
import { applyPaid } from './apply-paid';
import { applyEnded, applyLatePayment } from './apply-checkout-end';
import { applyDisputed, applyRefunded } from './apply-refunded';
import type { Effect, PaymentFact } from './payment-fact';

type EventState = (typeof providerEvents.$inferSelect)['state'];

/**
 * Gives a kept event its effect, once, in one transaction; events may come in any order and more than once.
 * One that speaks of what is not known yet stays kept, and one that says nothing we know is marked unknown.
 */
export async function applyProviderEvent(
  input: { providerEventId: number; fact: PaymentFact },
  ctx: Ctx,
): Promise<{ state: EventState }> {
  return write(ctx, async (w) => {
    const [event] = await w.tx
      .select({ id: providerEvents.id, state: providerEvents.state })
      .from(providerEvents)
      .where(eq(providerEvents.id, input.providerEventId))
      .for('update');
    if (event === undefined) throw new DomainError('not_found', 'There is no such event.');
    const subject = { type: 'event', id: event.id } as const;
    if (event.state !== 'kept') {
      await w.record({ action: 'event.already_done', subjects: [subject], details: { state: event.state } });
      return { state: event.state };
    }
    const effect = await effectOf(w, input.fact);
    await w.tx
      .update(providerEvents)
      .set({ state: effect.state, note: effect.note, appliedAt: effect.state === 'applied' ? w.now : null })
      .where(eq(providerEvents.id, event.id));
    await w.record({
      action: effect.action,
      subjects: [
        subject,
        ...(effect.orderId === null ? [] : [{ type: 'order' as const, id: effect.orderId }]),
      ],
      details: { ...effect.details, note: effect.note },
    });
    return { state: effect.state };
  });
}

async function effectOf(w: WriteContext, fact: PaymentFact): Promise<Effect> {
  switch (fact.kind) {
    case 'checkout_paid':
      return applyPaid(w, fact);
    case 'checkout_awaits_payment':
      return applyLatePayment(w, fact);
    case 'checkout_payment_failed':
    case 'checkout_expired':
      return applyEnded(w, fact);
    case 'payment_refunded':
      return applyRefunded(w, fact);
    case 'payment_disputed':
      return applyDisputed(w, fact);
    case 'unknown':
      return { state: 'unknown', action: 'event.unknown', orderId: null, note: fact.reason, details: {} };
  }
}
