import type { OrderState } from '~/domain/orders/status';
import { orderCan } from '~/domain/orders/status';
import { isPast, stageLabels } from '~/domain/production/stages';
import type { DispatchFacts, UnitAnswer } from '~/domain/production/unit-status';
import { unitCan } from '~/domain/production/unit-status';

/** All that decides whether a unit may leave, and the order it leaves for. */
export interface GateFacts extends DispatchFacts {
  /** Null where the unit is meant for no order. */
  orderState: OrderState | null;
  /** Where the buyer's address is; the order was sold, judged and declared for its destination. */
  addressCountry: string | null;
}

/**
 * Whether a unit may be packed and sent: `unitCan.dispatch`, and what stands against sending for its order.
 * Reasons are sentences, each of one thing that is missing.
 */
export function mayLeave(unit: GateFacts): UnitAnswer {
  const answer = unitCan.dispatch(unit);
  const reasons = [...(answer.ok ? [] : answer.reasons), ...stageReasons(unit), ...orderReasons(unit)];
  return reasons.length === 0 ? { ok: true } : { ok: false, reasons };
}

/** After rework a unit stands at its final test again, whatever an older run said. */
function stageReasons({ stage, newestRun }: GateFacts): string[] {
  if (stage === 'gone' || isPast('final_test', stage) || newestRun === null) return [];
  return [`It is at ${stageLabels[stage].toLowerCase()}.`];
}

function orderReasons({ orderState, order, addressCountry }: GateFacts): string[] {
  if (orderState === null || order === null) return [];
  const shipping = orderCan.ship(orderState);
  return [
    ...(shipping.ok ? [] : [shipping.reason]),
    ...(addressCountry === null || addressCountry === order.destination
      ? []
      : ['The address is in another country than the order was sold to.']),
  ];
}
