import { z } from 'zod';
import { entryReversal } from '~/schemas/stores-lots';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { reverseEntry } from '~/server/services/stores/reverse-entry';

export const POST = door({
  rule: staff('builder'),
  summary: 'Take a store entry back by another one',
  params: z.object({ number: z.string() }),
  input: entryReversal,
  output: z.object({
    reversalId: z.number().int(),
    lot: z.string(),
    quantity: z.number().int(),
    onHand: z.number().int(),
  }),
  said: ({ lot, onHand }) => `The entry is reversed; lot ${lot} has ${onHand} now.`,
  run: ({ params, input, ctx }) => reverseEntry({ ...input, lot: params.number }, ctx),
});
