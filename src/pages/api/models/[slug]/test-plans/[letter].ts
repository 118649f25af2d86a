import { z } from 'zod';
import { paths } from '~/lib/paths';
import { planEdit, planLetter } from '~/schemas/test-plans';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { saveTestPlan } from '~/server/services/production/save-test-plan';

export const POST = door({
  rule: staff(),
  summary: 'Save a draft test plan, whole: what is wrong comes back by row and field',
  params: z.object({ slug: z.string(), letter: planLetter }),
  input: planEdit,
  maxBytes: 512 * 1024,
  output: z.object({ letter: z.string(), points: z.number().int(), stamp: z.string() }),
  said: ({ letter, points }) =>
    `Test plan ${letter} is saved with ${points === 1 ? 'one point' : `${points} points`}.`,
  next: ({ letter }, { params }) => paths.testPlan(params.slug, letter),
  run: ({ params, input, ctx }) => saveTestPlan({ ...input, model: params.slug, letter: params.letter }, ctx),
});
