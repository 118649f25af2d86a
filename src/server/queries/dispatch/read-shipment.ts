import { and, asc, eq, inArray, ne, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/mysql-core';
import type { CustomsLine } from '~/domain/dispatch/customs';
import { customsLines } from '~/domain/dispatch/customs';
import type { ShipmentState } from '~/domain/dispatch/parcel';
import type { Reader } from '~/server/db/client';
import {
  certificates,
  contacts,
  models,
  orderLines,
  orders,
  shipments,
  shipmentUnits,
  spares,
  units,
  userProfiles,
} from '~/server/db/schema';
import { getWorks } from '~/server/queries/office/get-works';
import { addresseeOf } from './addressee';

export interface ShipmentView {
  id: number;
  number: number;
  state: ShipmentState;
  orderId: number;
  orderNumber: number;
  carrier: string;
  trackingNumber: string | null;
  weightG: number | null;
  packedAt: Date;
  packedBy: string;
  shippedAt: Date | null;
  shippedBy: string | null;
  destination: string;
  callSign: string | null;
  email: string;
  isErased: boolean;
  /** Name and address; who may see them, `seesAddressee` says. */
  addressee: string[];
  units: {
    serial: string;
    modelName: string;
    options: string[];
    certificate: { code: string; number: string; fileId: number | null };
  }[];
  /** Spares of the order; they lie in its first parcel. */
  spares: { name: string; partNumber: string; quantity: number }[];
  /** Null where the parcel stays in the works' country. */
  customs: CustomsLine[] | null;
  /** What of the order is still to come: other parcels that are packed, and one more where units are not. */
  parcelsToCome: number;
}

/** A shipment by its number or its id; null where there is none. */
export async function readShipment(
  reader: Reader,
  which: { number: number } | { id: number },
): Promise<ShipmentView | null> {
  const packer = alias(userProfiles, 'packer');
  const shipper = alias(userProfiles, 'shipper');
  const [found] = await reader
    .select({
      shipment: shipments,
      order: orders,
      contact: contacts,
      packedBy: packer.name,
      shippedBy: shipper.name,
    })
    .from(shipments)
    .innerJoin(orders, eq(orders.id, shipments.orderId))
    .innerJoin(contacts, eq(contacts.id, orders.contactId))
    .leftJoin(packer, eq(packer.userId, shipments.packedBy))
    .leftJoin(shipper, eq(shipper.userId, shipments.shippedBy))
    .where('id' in which ? eq(shipments.id, which.id) : eq(shipments.number, which.number));
  if (found === undefined) return null;
  const { shipment, order, contact } = found;
  const contents = await listContents(reader, shipment.id);
  const works = await getWorks(reader);
  const carries = await isFirstParcel(reader, shipment);
  const goods = carries ? await listSpares(reader, order.id) : [];
  const ofUnits = contents.map((unit) => ({
    description: unit.customsDescription,
    hsCode: unit.hsCode,
    // Rigs are made where the works stands.
    originCountry: works.country,
    netWeightG: unit.netWeightG,
    valueMinor: unit.unitPriceMinor ?? 0,
    currency: order.currency,
  }));
  const ofSpares = goods.flatMap(({ quantity, unitPriceMinor, name, hsCode, originCountry, netWeightG }) =>
    Array.from({ length: quantity }, () => ({
      description: name,
      hsCode,
      originCountry,
      netWeightG,
      valueMinor: unitPriceMinor,
      currency: order.currency,
    })),
  );
  return {
    id: shipment.id,
    number: shipment.number,
    state: shipment.state,
    orderId: order.id,
    orderNumber: order.number,
    carrier: shipment.carrier,
    trackingNumber: shipment.trackingNumber,
    weightG: shipment.weightG,
    packedAt: shipment.packedAt,
    packedBy: found.packedBy ?? 'somebody',
    shippedAt: shipment.shippedAt,
    shippedBy: found.shippedBy,
    destination: order.destinationCountry,
    callSign: contact.callSign,
    email: contact.email,
    isErased: contact.erasedAt !== null,
    addressee: addresseeOf(contact),
    units: contents.map(({ serial, modelName, options, code, certificateNumber, letter, fileId }) => ({
      serial,
      modelName,
      options: (options ?? []).map(({ label }) => label),
      certificate: { code, number: certificateNumber + letter, fileId },
    })),
    spares: goods.map(({ name, number, quantity }) => ({ name, partNumber: number, quantity })),
    customs: customsLines([...ofUnits, ...ofSpares], works.country, order.destinationCountry),
    parcelsToCome: await countToCome(reader, order.id, shipment.id),
  };
}

async function listContents(reader: Reader, shipmentId: number) {
  return reader
    .select({
      serial: units.serial,
      modelName: models.name,
      customsDescription: models.customsDescription,
      hsCode: models.hsCode,
      netWeightG: models.netWeightG,
      options: orderLines.options,
      unitPriceMinor: orderLines.unitPriceMinor,
      code: certificates.code,
      certificateNumber: certificates.number,
      letter: certificates.letter,
      fileId: certificates.fileId,
    })
    .from(shipmentUnits)
    .innerJoin(units, eq(units.id, shipmentUnits.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(certificates, eq(certificates.id, shipmentUnits.certificateId))
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .where(eq(shipmentUnits.shipmentId, shipmentId))
    .orderBy(asc(units.id));
}

async function isFirstParcel(reader: Reader, shipment: { id: number; orderId: number }): Promise<boolean> {
  const [first] = await reader
    .select({ id: shipments.id })
    .from(shipments)
    .where(eq(shipments.orderId, shipment.orderId))
    .orderBy(asc(shipments.id))
    .limit(1);
  return first?.id === shipment.id;
}

async function listSpares(reader: Reader, orderId: number) {
  return reader
    .select({
      name: spares.name,
      number: spares.number,
      hsCode: spares.hsCode,
      originCountry: spares.originCountry,
      netWeightG: spares.netWeightG,
      quantity: orderLines.quantity,
      unitPriceMinor: orderLines.unitPriceMinor,
    })
    .from(orderLines)
    .innerJoin(spares, eq(spares.id, orderLines.spareId))
    .where(eq(orderLines.orderId, orderId))
    .orderBy(asc(orderLines.lineNo));
}

async function countToCome(reader: Reader, orderId: number, shipmentId: number): Promise<number> {
  const packed = await reader
    .select({ id: shipments.id })
    .from(shipments)
    .where(and(eq(shipments.orderId, orderId), eq(shipments.state, 'packed'), ne(shipments.id, shipmentId)));
  const lines = reader.select({ id: orderLines.id }).from(orderLines).where(eq(orderLines.orderId, orderId));
  const [unpacked] = await reader
    .select({ id: units.id })
    .from(units)
    .where(and(inArray(units.orderLineId, lines), sql`${units.stage} not in ('ship', 'gone')`))
    .limit(1);
  return packed.length + (unpacked === undefined ? 0 : 1);
}
