import { asc, eq, sql } from 'drizzle-orm';
import type { OrderPlacing } from '~/schemas/order-placing';
import { checkouts, orderLines, units } from '~/server/db/schema';
import { applyProviderEvent } from '~/server/services/orders/apply-provider-event';
import { checkoutReference } from '~/server/services/orders/checkout-reference';
import { keepProviderEvent } from '~/server/services/orders/keep-provider-event';
import { placeOrder } from '~/server/services/orders/place-order';
import { recordHandPayment } from '~/server/services/orders/record-hand-payment';
import { storeCheckoutSession } from '~/server/services/orders/store-checkout-session';
import { wantCheckout } from '~/server/services/orders/want-checkout';
import type { Actor, WriteContext } from '~/server/write';
import { invariant } from '~/lib/invariant';
import type { DemoBuyer } from './buyers';
import type { Cast } from './people';
import type { Scene } from './play';

/** A unit of the demo, known by its serial number once its order is paid. */
export interface DemoUnit {
  serial: string;
  /** Of its newest run. */
  runId: number;
  /** Of its build sheet, by title; read when the first is ticked. */
  stepIds?: ReadonlyMap<string, number>;
}

/** An order of the demo, filled in as its scenes are played. */
export interface DemoOrder {
  id: number;
  number: number;
  units: DemoUnit[];
}

export interface Ordering {
  at: Date;
  batchNumber: () => number;
  buyer: DemoBuyer;
  option: string[];
  quantity: number;
  pay: OrderPlacing['pay'];
  /** By card through the provider, or at the counter. */
  by: 'card' | 'transfer' | 'cash';
  /** Who orders: a visitor, unless it is somebody who is signed in. */
  actor?: Actor;
}

const minuteMs = 60_000;
const visitor: Actor = { kind: 'visitor' };
const provider: Actor = { kind: 'provider' };

function after(at: Date, minutes: number): Date {
  return new Date(at.getTime() + minutes * minuteMs);
}

/** An order that is placed and paid, with its units to be. */
export function orderScenes(ordering: Ordering, cast: Cast): { order: DemoOrder; scenes: Scene[] } {
  const { at, batchNumber, buyer, option, quantity, pay, by } = ordering;
  const order: DemoOrder = {
    ...{ id: 0, number: 0 },
    units: Array.from({ length: quantity }, () => ({ serial: '', runId: 0 })),
  };
  let checkoutId = 0;
  const paidAt = after(at, 4);
  const scenes: Scene[] = [
    {
      at,
      actor: by === 'card' ? (ordering.actor ?? visitor) : cast.owner,
      play: async (w) => {
        const placed = await placeOrder({ ...buyer, batch: batchNumber(), option, quantity, pay }, w);
        order.id = placed.orderId;
        order.number = placed.number;
        checkoutId = placed.checkoutId;
      },
    },
    {
      at: paidAt,
      actor: by === 'card' ? provider : cast.owner,
      play: async (w) => {
        if (by === 'card') await payCheckout(w, checkoutId);
        else
          await recordHandPayment(
            { orderNumber: order.number, kind: by, amountMinor: await dueOf(w, checkoutId) },
            w,
          );
        await nameUnits(w, order);
      },
    },
  ];
  return { order, scenes };
}

/** An order that was placed and not paid. */
export function unpaidOrderScene(ordering: Ordering): { order: DemoOrder; scene: Scene } {
  const { at, batchNumber, buyer, option, quantity, pay } = ordering;
  const order: DemoOrder = { id: 0, number: 0, units: [] };
  const scene: Scene = {
    at,
    actor: visitor,
    play: async (w) => {
      const placed = await placeOrder({ ...buyer, batch: batchNumber(), option, quantity, pay }, w);
      order.id = placed.orderId;
      order.number = placed.number;
    },
  };
  return { order, scene };
}

/** The balance of an order, by card. */
export function balanceScene(order: DemoOrder, at: Date): Scene {
  return {
    at,
    actor: provider,
    play: async (w) => payCheckout(w, (await wantCheckout({ orderId: order.id }, w)).checkoutId),
  };
}

async function dueOf(w: WriteContext, checkoutId: number): Promise<number> {
  const [checkout] = await w.tx
    .select({ amountMinor: checkouts.amountMinor })
    .from(checkouts)
    .where(eq(checkouts.id, checkoutId));
  invariant(checkout !== undefined, 'an order has a checkout');
  return checkout.amountMinor;
}

/** What the payment provider would say, kept and applied as its events are. */
async function payCheckout(w: WriteContext, checkoutId: number): Promise<void> {
  const [checkout] = await w.tx.select().from(checkouts).where(eq(checkouts.id, checkoutId));
  invariant(checkout !== undefined, 'an order has a checkout');
  const sessionId = `cs_demo_${checkoutId}`;
  const paymentIntentId = `pi_demo_${checkoutId}`;
  const reference = checkoutReference(checkout);
  await storeCheckoutSession({ checkoutId, sessionId, url: `https://payments.example/${sessionId}` }, w);
  const type = 'checkout.session.completed';
  const { providerEventId } = await keepProviderEvent(
    {
      ...{ eventId: `evt_demo_${checkoutId}`, type, objectId: sessionId },
      body: JSON.stringify({ type, data: { object: { id: sessionId, client_reference_id: reference } } }),
    },
    w,
  );
  await applyProviderEvent(
    {
      providerEventId,
      fact: {
        ...{ kind: 'checkout_paid', checkoutId: reference, sessionId, paymentIntentId },
        ...{ amountMinor: checkout.amountMinor, currency: 'EUR' },
      },
    },
    w,
  );
}

async function nameUnits(w: WriteContext, order: DemoOrder): Promise<void> {
  const spawned = await w.tx
    .select({ serial: units.serial })
    .from(units)
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .where(eq(orderLines.orderId, order.id))
    .orderBy(asc(units.id));
  invariant(spawned.length === order.units.length, 'a paid line has its units');
  for (const [index, { serial }] of spawned.entries()) {
    const unit = order.units[index];
    if (unit !== undefined) unit.serial = serial;
  }
}

/** Payment pages of the past that were not used have ended. */
export async function endOldCheckouts(w: WriteContext): Promise<void> {
  await w.tx
    .update(checkouts)
    .set({ state: 'expired' })
    .where(sql`${checkouts.state} in ('wanted', 'open') and ${checkouts.expiresAt} < ${w.now}`);
}
