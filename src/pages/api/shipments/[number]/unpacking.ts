import { z } from 'zod';
import { paths } from '~/lib/paths';
import { shipmentParam } from '~/schemas/dispatch-parcels';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { unpackShipment } from '~/server/services/dispatch/unpack-shipment';

export const POST = door({
  rule: staff('shipper'),
  summary: 'Take a parcel that has not left apart again',
  params: shipmentParam,
  output: z.object({ orderNumber: z.number().int() }),
  next: ({ orderNumber }) => paths.packOrder(orderNumber),
  said: () => 'Unpacked; its units wait to be packed.',
  run: ({ params, ctx }) => unpackShipment(params, ctx),
});
