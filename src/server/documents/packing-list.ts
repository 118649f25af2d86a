import { customsTotal, formatWeight } from '~/domain/dispatch/customs';
import { seesAddressee } from '~/domain/dispatch/parcel';
import { formatMoneyInFull } from '~/domain/money/format-money';
import type { StaffRole } from '~/domain/people/roles';
import { countryName } from '~/lib/countries';
import { dayOf } from '~/lib/dates';
import type { Reader } from '~/server/db/client';
import { DomainError } from '~/server/errors';
import { renderPackingList } from '~/server/pdf/packing-list';
import type { PackingList } from '~/server/pdf/packing-list';
import { readShipment } from '~/server/queries/dispatch/read-shipment';
import type { ShipmentView } from '~/server/queries/dispatch/read-shipment';
import { readWorksData } from '~/server/queries/office/read-works-data';

/**
 * The packing list of a shipment as PDF, for people who see to whom it goes.
 *
 * @throws DomainError `not_found`, `forbidden` for a shipper once the parcel has left
 */
export async function makePackingList(
  reader: Reader,
  { number, roles }: { number: number; roles: readonly StaffRole[] },
) {
  const [shipment, works] = await Promise.all([readShipment(reader, { number }), readWorksData(reader)]);
  if (shipment === null || works === null) {
    throw new DomainError('not_found', `There is no shipment ${number}.`);
  }
  if (!seesAddressee(roles, shipment.state)) {
    throw new DomainError(
      'forbidden',
      'The parcel has left; its papers bear an address and are the owner’s now.',
    );
  }
  const bytes = await renderPackingList({
    works: { name: works.name, addressLines: [...works.addressLines, countryName(works.country)] },
    orderNumber: String(shipment.orderNumber),
    packedOn: dayOf(shipment.packedAt, works.timeZone),
    packedBy: shipment.packedBy,
    addressee: shipment.addressee,
    units: shipment.units.map(({ serial, modelName, options, certificate }) => ({
      serial,
      model: modelName,
      options: options.join(', '),
      certificateNumber: certificate.number,
    })),
    spares: shipment.spares,
    customs: printedCustoms(shipment),
    carrier: shipment.carrier === '' ? 'not chosen yet' : shipment.carrier,
    trackingNumber: shipment.trackingNumber ?? '',
    parcels: 1,
  });
  return {
    bytes: new Uint8Array(bytes),
    mediaType: 'application/pdf',
    fileName: `packing-list-${shipment.orderNumber}-${shipment.number}.pdf`,
    inline: true,
  };
}

function printedCustoms({ customs }: ShipmentView): PackingList['customs'] {
  const currency = customs?.[0]?.currency;
  if (customs === null || currency === undefined) return null;
  const total = customsTotal(customs);
  return {
    lines: customs.map((line) => ({
      description: line.description,
      quantity: line.quantity,
      hsCode: line.hsCode,
      origin: countryName(line.originCountry),
      netWeight: formatWeight(line.netWeightG),
      value: formatMoneyInFull({ minor: line.valueMinor, currency }),
    })),
    netWeight: formatWeight(total.netWeightG),
    value: formatMoneyInFull({ minor: total.valueMinor, currency }),
  };
}
