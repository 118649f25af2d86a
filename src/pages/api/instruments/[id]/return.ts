import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { returnInstrument } from '~/server/services/bench/return-instrument';

export const POST = door({
  rule: staff('tester'),
  summary: 'Put an instrument back in use',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ instrumentId: z.number().int(), number: z.string(), revision: z.number().int() }),
  said: ({ number }) => `${number} is back in use.`,
  next: ({ number }) => paths.instrument(number),
  run: ({ params, ctx }) => returnInstrument({ instrumentId: params.id }, ctx),
});
