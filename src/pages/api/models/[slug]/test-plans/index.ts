import { z } from 'zod';
import { paths } from '~/lib/paths';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { draftTestPlan } from '~/server/services/production/draft-test-plan';

export const POST = door({
  rule: staff(),
  summary: 'Draft the next test plan of a model as a copy of the newest one',
  params: z.object({ slug: z.string() }),
  output: z.object({ testPlanRevisionId: z.number().int(), letter: z.string() }),
  said: ({ letter }) => `Test plan ${letter} is drafted.`,
  next: ({ letter }, { params }) => paths.testPlan(params.slug, letter),
  run: ({ params, ctx }) => draftTestPlan({ model: params.slug }, ctx),
});
