import { z } from 'zod';
import { limitRuleEdit } from '~/schemas/definitions-edit';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { reviseLimitRule } from '~/server/services/bench/revise-limit-rule';

export const POST = door({
  rule: staff(),
  summary: 'Add an emission rule of the works’ own, or make its next revision',
  input: limitRuleEdit,
  maxBytes: 256 * 1024,
  output: z.object({ key: z.string(), revision: z.number().int() }),
  said: ({ key, revision }) => `Revision ${revision} of ${key} counts from now on.`,
  run: ({ input, ctx }) => reviseLimitRule(input, ctx),
});
