import { and, eq, ne, sql } from 'drizzle-orm';
import { allHasLeft, parcelCan } from '~/domain/dispatch/parcel';
import { checkTracking } from '~/domain/dispatch/tracking-number';
import { orderCan } from '~/domain/orders/status';
import { isPast } from '~/domain/production/stages';
import { orders, shipments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { UnitGate } from '~/server/queries/dispatch/read-gate-facts';
import { advanceUnit } from '~/server/services/production/advance-unit';
import type { Ctx, WriteContext } from '~/server/write';
import { actingUserId, write } from '~/server/write';
import { mustMayLeave } from './lock-order';
import { lockShipment } from './lock-shipment';

export interface Shipping {
  number: number;
  carrier: string;
  /** Null where it goes without one. */
  trackingNumber: string | null;
  /** That a tracking number which looks mistyped was looked at and is right. */
  trackingConfirmed?: boolean | undefined;
}

/**
 * Ships a packed parcel: its units are gone, the certificates and the tracking number go out by mail, and an
 * order of which all has left is closed. The rule of dispatch is asked again. Told again of a parcel that has
 * left, it changes nothing.
 *
 * @throws DomainError `not_found`, `refused` where the tracking number looks mistyped, `conflict` with all that
 * stands against it, or where it left with another number
 */
export async function shipShipment(
  input: Shipping,
  ctx: Ctx,
): Promise<{ shipmentId: number; shipmentNumber: number; orderFulfilled: boolean }> {
  return write(ctx, async (w) => {
    const { order, gates, rigsOrdered, shipment, contents } = await lockShipment(w.tx, input.number);
    const trackingNumber = input.trackingNumber === null ? null : checkTracking(input.trackingNumber).number;
    const subjects = [
      { type: 'shipment' as const, id: shipment.id },
      { type: 'order' as const, id: order.id },
    ];
    const answer = parcelCan.ship(shipment.state);
    if (!answer.ok) {
      if (shipment.trackingNumber !== trackingNumber || shipment.carrier !== input.carrier) {
        throw new DomainError('conflict', `${answer.reason} It left with ${named(shipment)}.`);
      }
      await w.record({ action: 'shipment.ship_again', subjects, details: { shipment: shipment.number } });
      const orderFulfilled = !orderCan.ship(order.state).ok;
      return { shipmentId: shipment.id, shipmentNumber: shipment.number, orderFulfilled };
    }
    await checkNumber(w, input, shipment.id);
    const parcel = gates.filter(({ unitId }) => contents.some((content) => content.unitId === unitId));
    if (parcel.length === 0 || parcel.length < contents.length) {
      throw new DomainError(
        'conflict',
        'A unit in this parcel is meant for another order now. Unpack it and pack it again.',
      );
    }
    mustMayLeave(parcel);
    mustHoldTheRight(parcel, contents);

    for (const { unitId, facts } of parcel) await advanceUnit(w, { id: unitId, stage: facts.stage }, 'gone');
    await w.tx
      .update(shipments)
      .set({
        state: 'shipped',
        carrier: input.carrier,
        trackingNumber,
        shippedAt: w.now,
        shippedBy: actingUserId(w),
        version: sql`${shipments.version} + 1`,
      })
      .where(eq(shipments.id, shipment.id));
    const goneBefore = gates.filter(({ facts }) => isPast('ship', facts.stage)).length;
    const orderFulfilled = allHasLeft({ rigsOrdered, unitsGone: goneBefore + parcel.length });
    if (orderFulfilled) {
      const closing = orderCan.fulfil(order.state);
      if (!closing.ok) throw new DomainError('conflict', closing.reason);
      await w.tx
        .update(orders)
        .set({ state: 'fulfilled', version: sql`${orders.version} + 1` })
        .where(eq(orders.id, order.id));
    }
    await w.post({
      kind: 'mail',
      key: `shipped:${shipment.id}`,
      payload: { letter: 'shipped', shipmentId: shipment.id },
    });
    await w.record({
      action: 'shipment.ship',
      subjects: [...subjects, ...parcel.map(({ unitId }) => ({ type: 'unit' as const, id: unitId }))],
      details: {
        shipment: shipment.number,
        carrier: input.carrier,
        trackingNumber,
        serials: parcel.map(({ serial }) => serial),
        ...(orderFulfilled ? { order: { from: order.state, to: 'fulfilled' } } : {}),
      },
    });
    return { shipmentId: shipment.id, shipmentNumber: shipment.number, orderFulfilled };
  });
}

function named({ carrier, trackingNumber }: { carrier: string; trackingNumber: string | null }): string {
  return trackingNumber === null ? `${carrier}, without a tracking number` : `${carrier}, ${trackingNumber}`;
}

async function checkNumber(w: WriteContext, input: Shipping, shipmentId: number): Promise<void> {
  if (input.trackingNumber === null || input.trackingConfirmed === true) return;
  const check = checkTracking(input.trackingNumber);
  if (check.kind === 's10_wrong') {
    throw refused(`${check.reason} Type it again, or tick that it stands so on the label.`);
  }
  const [other] = await w.tx
    .select({ number: shipments.number })
    .from(shipments)
    .where(and(eq(shipments.trackingNumber, check.number), ne(shipments.id, shipmentId)));
  if (other === undefined) return;
  throw refused(
    `Shipment ${other.number} has the tracking number ${check.number} already. Type it again, or tick that it stands so on the label.`,
  );
}

function refused(sentence: string): DomainError {
  return new DomainError('refused', sentence, { trackingNumber: sentence });
}

/** A new certificate since packing means that the printed one in the parcel is not the one that counts. */
function mustHoldTheRight(
  parcel: readonly UnitGate[],
  contents: readonly { unitId: number; certificateId: number }[],
): void {
  const stale = parcel.filter(
    ({ unitId, certificate, facts }) =>
      facts.stage !== 'ship' ||
      contents.find((content) => content.unitId === unitId)?.certificateId !== certificate?.id,
  );
  if (stale.length === 0) return;
  const serials = stale.map(({ serial }) => serial).join(', ');
  throw new DomainError(
    'conflict',
    `${serials}: tested or certified anew since packing. Unpack it and pack it again.`,
  );
}
