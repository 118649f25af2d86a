import { log } from '~/server/log';
import { applyProviderEvent } from '~/server/services/orders/apply-provider-event';
import { keepProviderEvent } from '~/server/services/orders/keep-provider-event';
import type { CallContext } from '~/server/write';
import { readProviderEvent } from './read-event';
import type { ProviderEvent } from './verify-event';

/**
 * Keeps a verified event, then gives it its effect. An event that is kept but could not take effect now is
 * taken up by a job, so the provider need not send it again.
 *
 * @param rawBody the event as it came
 */
export async function takeProviderEvent(
  event: ProviderEvent,
  rawBody: string,
  ctx: CallContext,
): Promise<{ state: 'kept' | 'applied' | 'unknown' }> {
  const { id } = event.data.object;
  const { providerEventId } = await keepProviderEvent(
    {
      eventId: event.id,
      type: event.type,
      objectId: typeof id === 'string' ? id.slice(0, 255) : '',
      body: rawBody,
    },
    ctx,
  );
  try {
    return await applyProviderEvent({ providerEventId, fact: readProviderEvent(event) }, ctx);
  } catch (error) {
    log.error({ err: error, eventId: event.id }, 'an event of the payment provider could not be applied yet');
    return { state: 'kept' };
  }
}
