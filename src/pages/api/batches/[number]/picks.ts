import { z } from 'zod';
import { batchIssue } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { issueToBatch } from '~/server/services/production/issue-to-batch';

export const POST = door({
  rule: staff('builder'),
  summary: 'Issue to a batch what its units need of the parts traced by batch',
  params: z.object({ number: z.coerce.number().int().positive() }),
  input: batchIssue,
  output: z.object({
    batchNumber: z.number().int(),
    partCount: z.number().int(),
    quantity: z.number().int(),
    shortages: z.array(
      z.object({ partNumber: z.string(), wanted: z.number().int(), available: z.number().int() }),
    ),
  }),
  said: ({ batchNumber, partCount, quantity, shortages }) => {
    const short =
      shortages.length === 0 ? '' : ` Still short of ${shortages.map((one) => one.partNumber).join(', ')}.`;
    return `${quantity} pieces of ${partCount} parts were issued to batch ${batchNumber}.${short}`;
  },
  run: ({ params, input, ctx }) =>
    issueToBatch({ batchNumber: params.number, evenIfShort: input.evenIfShort }, ctx),
});
