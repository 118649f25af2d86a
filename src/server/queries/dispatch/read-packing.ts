import { asc, eq } from 'drizzle-orm';
import type { StaffRole } from '~/domain/people/roles';
import type { ShipmentState } from '~/domain/dispatch/parcel';
import { seesAddressee } from '~/domain/dispatch/parcel';
import type { Reader } from '~/server/db/client';
import { contacts, orders, shipments } from '~/server/db/schema';
import { addresseeOf } from './addressee';
import { listDispatch } from './list-ready';
import type { DispatchOrder } from './list-ready';

export interface Packing extends DispatchOrder {
  /** Null where nothing of it is ready, or the person does not see it. */
  addressee: string[] | null;
  parcels: { number: number; state: ShipmentState; weightG: number | null }[];
}

/**
 * An order on the packing table; null where there is none, or nothing of it has come to dispatch yet.
 *
 * @param person.roles a shipper sees the address once there is something to ship
 */
export async function readPacking(
  reader: Reader,
  number: number,
  person: { roles: readonly StaffRole[]; today: string },
): Promise<Packing | null> {
  const [order] = await listDispatch(reader, { today: person.today, orderNumber: number });
  if (order === undefined) return null;
  const [found] = await reader
    .select({ contact: contacts })
    .from(orders)
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .where(eq(orders.id, order.id));
  const parcels = await reader
    .select({ number: shipments.number, state: shipments.state, weightG: shipments.weightG })
    .from(shipments)
    .where(eq(shipments.orderId, order.id))
    .orderBy(asc(shipments.number));
  if (parcels.length === 0 && order.units.every(({ stage }) => stage !== 'pack')) return null;
  const toShip = order.units.some(({ isReady, stage }) => isReady || stage === 'ship');
  const sees = seesAddressee(person.roles, toShip ? 'packed' : 'shipped');
  return { ...order, addressee: sees && found !== undefined ? addresseeOf(found.contact) : null, parcels };
}
