import { z } from 'zod';
import { lotStateChange } from '~/schemas/stores-lots';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { setLotState } from '~/server/services/stores/set-lot-state';

export const POST = door({
  rule: staff('builder'),
  summary: 'Make a lot usable, set it waiting, or bar it',
  params: z.object({ number: z.string() }),
  input: lotStateChange,
  output: z.object({ lotId: z.number().int(), number: z.string(), state: z.string() }),
  said: ({ number, state }) => `Lot ${number} is ${state}.`,
  run: ({ params, input, ctx }) => setLotState({ ...input, lot: params.number }, ctx),
});
