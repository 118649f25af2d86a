import { z } from 'zod';
import { paths } from '~/lib/paths';
import { receipt } from '~/schemas/stores-lots';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { receiveLot } from '~/server/services/stores/receive-lot';

export const POST = door({
  rule: staff('builder'),
  summary: 'Receive a part: a new lot',
  input: receipt,
  output: z.object({
    lotId: z.number().int(),
    number: z.string(),
    partNumber: z.string(),
    quantity: z.number().int(),
  }),
  said: ({ number, partNumber, quantity }) =>
    `${quantity} of ${partNumber} came in as lot ${number}. Write ${number} on the bag.`,
  next: ({ number }) => paths.lot(number),
  run: ({ input, ctx }) => receiveLot(input, ctx),
});
