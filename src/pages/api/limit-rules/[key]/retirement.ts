import { z } from 'zod';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { retireLimitRule } from '~/server/services/bench/retire-limit-rule';

export const POST = door({
  rule: staff(),
  summary: 'Take an emission rule of the works’ own out of use',
  params: z.object({ key: z.string().max(60) }),
  output: z.object({ key: z.string() }),
  said: ({ key }) => `${key} is out of use.`,
  run: ({ params, ctx }) => retireLimitRule(params, ctx),
});
