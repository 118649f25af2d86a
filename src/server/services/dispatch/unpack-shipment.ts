import { eq } from 'drizzle-orm';
import { parcelCan } from '~/domain/dispatch/parcel';
import { shipments, shipmentUnits } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { advanceUnit } from '~/server/services/production/advance-unit';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';
import { lockShipment } from './lock-shipment';

/**
 * Takes a parcel that has not left apart again; its units wait to be packed. The ledger keeps what was in it.
 *
 * @throws DomainError `not_found`, `conflict` where it has left
 */
export async function unpackShipment(input: { number: number }, ctx: Ctx): Promise<{ orderNumber: number }> {
  return write(ctx, async (w) => {
    const { order, gates, shipment, contents } = await lockShipment(w.tx, input.number);
    const answer = parcelCan.unpack(shipment.state);
    if (!answer.ok) throw new DomainError('conflict', answer.reason);
    const parcel = gates.filter(({ unitId }) => contents.some((content) => content.unitId === unitId));
    for (const { unitId, facts } of parcel) {
      if (facts.stage === 'ship') await advanceUnit(w, { id: unitId, stage: facts.stage }, 'pack');
    }
    await w.tx.delete(shipmentUnits).where(eq(shipmentUnits.shipmentId, shipment.id));
    await w.tx.delete(shipments).where(eq(shipments.id, shipment.id));
    await w.record({
      action: 'shipment.unpack',
      subjects: [
        { type: 'shipment', id: shipment.id },
        { type: 'order', id: order.id },
        ...contents.map(({ unitId }) => ({ type: 'unit' as const, id: unitId })),
      ],
      details: { shipment: shipment.number, serials: parcel.map(({ serial }) => serial) },
    });
    return { orderNumber: order.number };
  });
}
