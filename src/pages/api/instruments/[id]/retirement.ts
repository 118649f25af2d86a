import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { retireInstrument } from '~/server/services/bench/retire-instrument';

export const POST = door({
  rule: staff('tester'),
  summary: 'Take an instrument out of use',
  params: z.object({ id: z.coerce.number().int() }),
  output: z.object({ instrumentId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} is out of use; what was read with it stays.`,
  next: ({ number }) => paths.instrument(number),
  run: ({ params, ctx }) => retireInstrument({ instrumentId: params.id }, ctx),
});
