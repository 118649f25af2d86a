import { seesAddressee } from '~/domain/dispatch/parcel';
import { paths } from '~/lib/paths';
import { parcelShipped, parcelShipping, shipmentParam, shipmentReading } from '~/schemas/dispatch-parcels';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { readShipment } from '~/server/queries/dispatch/read-shipment';
import { staff } from '~/server/rules';
import { shipShipment } from '~/server/services/dispatch/ship-shipment';

export const GET = door({
  rule: staff('shipper', 'bookkeeper'),
  summary: 'A shipment: what is in it, its carrier and, while it is here, its address',
  params: shipmentParam,
  output: shipmentReading,
  run: async ({ params, person, ctx }) => {
    const shipment = await readShipment(ctx.db, params);
    if (shipment === null) throw new DomainError('not_found', `There is no shipment ${params.number}.`);
    return {
      ...shipment,
      addressee: seesAddressee(person?.roles ?? [], shipment.state) ? shipment.addressee : null,
      units: shipment.units.map(({ serial, modelName, certificate }) => ({
        serial,
        modelName,
        certificate: certificate.number,
      })),
    };
  },
});

export const POST = door({
  rule: staff('shipper'),
  summary: 'Ship a packed parcel with its carrier and tracking number',
  params: shipmentParam,
  input: parcelShipping,
  output: parcelShipped,
  next: ({ shipmentNumber }) => paths.shipment(shipmentNumber),
  said: ({ orderFulfilled }) =>
    orderFulfilled
      ? 'Shipped; all of the order has left. The certificate and the tracking number are on their way by mail.'
      : 'Shipped. The certificate and the tracking number are on their way by mail.',
  run: ({ params, input, ctx }) => shipShipment({ ...input, number: params.number }, ctx),
});
