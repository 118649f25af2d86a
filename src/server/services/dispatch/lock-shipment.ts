import { eq } from 'drizzle-orm';
import type { Tx } from '~/server/db/client';
import { shipments, shipmentUnits } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { lockOrderForDispatch } from './lock-order';

/**
 * Locks a shipment after the order it belongs to and all that the rule of dispatch looks at.
 *
 * @throws DomainError `not_found`
 */
export async function lockShipment(tx: Tx, number: number) {
  const [found] = await tx
    .select({ orderId: shipments.orderId })
    .from(shipments)
    .where(eq(shipments.number, number));
  if (found === undefined) throw new DomainError('not_found', `There is no shipment ${number}.`);
  const locked = await lockOrderForDispatch(tx, { id: found.orderId });
  const [shipment] = await tx.select().from(shipments).where(eq(shipments.number, number)).for('update');
  if (shipment === undefined) throw new DomainError('not_found', `There is no shipment ${number}.`);
  const contents = await tx
    .select({ unitId: shipmentUnits.unitId, certificateId: shipmentUnits.certificateId })
    .from(shipmentUnits)
    .where(eq(shipmentUnits.shipmentId, shipment.id));
  return { ...locked, shipment, contents };
}
