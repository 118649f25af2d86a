import { z } from 'zod';
import { lotCount } from '~/schemas/stores-lots';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { countLot } from '~/server/services/stores/count-lot';

export const POST = door({
  rule: staff('builder'),
  summary: 'Take a lot as counted',
  params: z.object({ number: z.string() }),
  input: lotCount,
  output: z.object({
    entryId: z.number().int(),
    number: z.string(),
    difference: z.number().int(),
    onHand: z.number().int(),
  }),
  said: ({ number, onHand, difference }) =>
    `Lot ${number} has ${onHand} now, ${Math.abs(difference)} ${difference < 0 ? 'fewer' : 'more'} than the books had.`,
  run: ({ params, input, ctx }) => countLot({ ...input, lot: params.number }, ctx),
});
