import { orderCan } from '~/domain/orders/status';
import type { StaffRole } from '~/domain/people/roles';
import type { Reader } from '~/server/db/client';
import { readOrder } from './read-order';

interface Person {
  id: number;
  roles: readonly StaffRole[];
}

/**
 * An order as far as a person may see it: a buyer their own, the owner and the bookkeeper all, a shipper the
 * address of what is to ship, builders and testers the call sign. Null where it is not theirs to know of.
 */
export async function readOrderFor(reader: Reader, number: number, person: Person, now: Date) {
  const order = await readOrder(reader, { number }, now);
  if (order === null) return null;
  const isTheirs = order.buyerUserId === person.id;
  if (person.roles.length === 0 && !isTheirs) return null;
  const all = isTheirs || person.roles.some((role) => role === 'owner' || role === 'bookkeeper');
  const withAddress = all || (person.roles.includes('shipper') && orderCan.ship(order.state).ok);
  const { contact, currency, totalMinor, paidMinor, refundedMinor, balanceMinor } = order;
  const { name, addressLines, city, region, postcode, country } = contact;
  return {
    number: order.number,
    state: order.state,
    placedAt: order.placedAt,
    promisedOn: order.promisedOn,
    callSign: contact.callSign,
    lines: order.lines.map((line) => ({
      description: line.description,
      options: line.options,
      quantity: line.quantity,
      batchNumber: line.batchNumber,
      ...(all ? { totalMinor: line.totalMinor } : {}),
    })),
    units: order.units.map(({ serial, stage, certificate, shipment }) => ({
      serial,
      stage,
      certificate: certificate === null ? null : `${certificate.number}${certificate.letter}`,
      trackingNumber: shipment?.trackingNumber ?? null,
    })),
    waitsForBalance: balanceMinor > 0,
    ...(all
      ? { money: { currency, totalMinor, paidMinor, refundedMinor, balanceMinor }, email: contact.email }
      : {}),
    ...(withAddress ? { address: { name, addressLines, city, region, postcode, country } } : {}),
  };
}
