import { log } from '~/server/log';
import { listSilentCheckouts, listUnopenedCheckouts } from '~/server/services/orders/list-waiting-payments';
import type { CallContext } from '~/server/write';
import { provider } from './shared-client';
import { startCheckout } from './start-checkout';
import { takeProviderEvent } from './take-provider-event';

/**
 * Takes up checkouts that were cut off between their services: opens those that were only written, and asks
 * the provider about those whose page has ended without an event. Runs before expired holds are released.
 */
export async function reconcileCheckouts(ctx: CallContext): Promise<{ opened: number; asked: number }> {
  let opened = 0;
  for (const checkoutId of await listUnopenedCheckouts(ctx)) {
    const { providerUrl } = await startCheckout(checkoutId, ctx);
    if (providerUrl !== null) opened += 1;
  }
  const silent = await listSilentCheckouts(ctx);
  for (const { sessionId } of silent) await ask(sessionId, ctx);
  return { opened, asked: silent.length };
}

/** What the provider answers is kept and applied as an event of its own, by the same rules. */
async function ask(sessionId: string, ctx: CallContext): Promise<void> {
  try {
    const session = await provider().checkout.sessions.retrieve(sessionId);
    if (session.payment_status !== 'paid') return;
    const event = {
      id: `asked_${sessionId}`,
      object: 'event' as const,
      type: 'checkout.session.completed',
      created: Math.floor(ctx.now.getTime() / 1000),
      livemode: session.livemode,
      data: { object: { ...session } },
    };
    await takeProviderEvent(event, JSON.stringify(event), ctx);
  } catch (error) {
    log.warn({ err: error, sessionId }, 'the payment provider was asked about a checkout and did not answer');
  }
}
