import { z } from 'zod';
import { paths } from '~/lib/paths';
import { undoing } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { undoPick } from '~/server/services/production/undo-pick';

/** Posted by forms; a pick is not deleted but reversed, so there is no DELETE. */
export const POST = door({
  rule: staff('builder'),
  summary: 'Put a pick back into its lot',
  params: z.object({ serial: z.string(), pickId: z.coerce.number().int().positive() }),
  input: undoing,
  output: z.object({ serial: z.string(), lot: z.string(), quantity: z.number().int() }),
  said: ({ lot, quantity }) => `${quantity} went back into ${lot}.`,
  next: ({ serial }) => paths.unitKit(serial),
  run: ({ params, input, ctx }) => undoPick({ ...params, reason: input.reason }, ctx),
});
