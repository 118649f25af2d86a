import { log } from '~/server/log';
import { applyProviderEvent } from '~/server/services/orders/apply-provider-event';
import { isAboutKnownThing, listKeptEvents } from '~/server/services/orders/list-waiting-payments';
import type { CallContext } from '~/server/write';
import { readProviderEvent } from './read-event';
import { parseKeptEvent } from './verify-event';

/**
 * Applies the events that arrived before what they speak of was known, or could not be applied then.
 *
 * @returns how many took effect
 */
export async function applyKeptEvents(ctx: CallContext): Promise<{ applied: number }> {
  let applied = 0;
  for (const { id, body } of await listKeptEvents(ctx)) {
    const event = parseKeptEvent(body);
    if (event === null) continue;
    const fact = readProviderEvent(event);
    if (!(await isAboutKnownThing(fact, ctx))) continue;
    try {
      const { state } = await applyProviderEvent({ providerEventId: id, fact }, ctx);
      if (state === 'applied') applied += 1;
    } catch (error) {
      log.error({ err: error, providerEventId: id }, 'a kept event could not be applied');
    }
  }
  return { applied };
}
