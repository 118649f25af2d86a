import { shipmentParam } from '~/schemas/dispatch-parcels';
import { makePackingList } from '~/server/documents/packing-list';
import { door } from '~/server/door';
import { staff } from '~/server/rules';

export const GET = door({
  rule: staff('shipper', 'bookkeeper'),
  summary: 'The packing list of a shipment as PDF, with what customs asks for',
  params: shipmentParam,
  output: 'file',
  run: ({ params, person, ctx }) =>
    makePackingList(ctx.db, { number: params.number, roles: person?.roles ?? [] }),
});
