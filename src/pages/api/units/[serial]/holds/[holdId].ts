import { z } from 'zod';
import { holdEnd } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { endHold } from '~/server/services/production/end-hold';

export const POST = door({
  rule: staff('builder', 'tester', 'shipper'),
  summary: 'End a hold that stands on a unit, its batch or its order',
  params: z.object({ serial: z.string(), holdId: z.coerce.number().int().positive() }),
  input: holdEnd,
  output: z.object({ holdId: z.number().int() }),
  said: () => 'The hold has ended.',
  run: ({ params, input, ctx }) => endHold({ holdId: params.holdId, reason: input.reason }, ctx),
});
