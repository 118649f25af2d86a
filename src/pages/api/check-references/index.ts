import { z } from 'zod';
import { newCheckReference } from '~/schemas/bench-checks';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { defineCheckReference } from '~/server/services/bench/define-check-reference';

export const POST = door({
  rule: staff('tester'),
  summary: 'Define a reference of the daily check',
  input: newCheckReference,
  output: z.object({ checkReferenceId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} is measured at the start of each session from now on.`,
  run: ({ input, ctx }) => defineCheckReference(input, ctx),
});
