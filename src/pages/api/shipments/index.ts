import { paths } from '~/lib/paths';
import { parcelPacked, parcelPacking } from '~/schemas/dispatch-parcels';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { packOrder } from '~/server/services/dispatch/pack-order';

export const POST = door({
  rule: staff('shipper'),
  summary: 'Pack units of an order into a parcel, by their scanned serial numbers',
  input: parcelPacking,
  output: parcelPacked,
  next: ({ shipmentNumber }) => paths.shipment(shipmentNumber),
  said: ({ shipmentNumber }) => `Packed as shipment ${shipmentNumber}. Print its packing list, then ship it.`,
  run: ({ input, ctx }) => packOrder(input, ctx),
});
