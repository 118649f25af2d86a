import { z } from 'zod';
import { paths } from '~/lib/paths';
import { pick } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { pickForUnit } from '~/server/services/production/pick-for-unit';

export const POST = door({
  rule: staff('builder'),
  summary: 'Pick a part for a unit from the lot that was scanned',
  params: z.object({ serial: z.string() }),
  input: pick,
  output: z.object({
    pickId: z.number().int(),
    serial: z.string(),
    lot: z.string(),
    partNumber: z.string(),
    quantity: z.number().int(),
    designators: z.array(z.string()),
  }),
  said: ({ partNumber, quantity, lot, designators }) => {
    const places = designators.length === 0 ? '' : ` for ${designators.join(', ')}`;
    return `${quantity} × ${partNumber}${places} from ${lot}.`;
  },
  next: ({ serial }) => paths.unitKit(serial),
  run: ({ params, input, ctx }) => pickForUnit({ ...input, serial: params.serial }, ctx),
});
