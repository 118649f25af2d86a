import { z } from 'zod';
import { paths } from '~/lib/paths';
import { kitFinish } from '~/schemas/production-floor';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { finishKit } from '~/server/services/production/finish-kit';

export const POST = door({
  rule: staff('builder'),
  summary: 'Finish the kit of a unit',
  params: z.object({ serial: z.string() }),
  input: kitFinish,
  output: z.object({ serial: z.string(), stage: z.string() }),
  said: ({ serial }) => `The kit of ${serial} is finished; its first stub is torn off.`,
  next: ({ serial }) => paths.unit(serial),
  run: ({ params, input, ctx }) => finishKit({ ...input, serial: params.serial }, ctx),
});
