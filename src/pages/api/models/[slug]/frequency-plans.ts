import { z } from 'zod';
import { paths } from '~/lib/paths';
import { frequencyPlanRevision } from '~/schemas/frequency-plans';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { reviseFrequencyPlan } from '~/server/services/bench/revise-frequency-plan';

export const POST = door({
  rule: staff(),
  summary: 'Give a model the next revision of its frequency plan',
  params: z.object({ slug: z.string() }),
  input: frequencyPlanRevision,
  output: z.object({ model: z.string(), revision: z.number().int() }),
  said: ({ revision }) => `Revision ${revision} of the frequency plan applies from now on.`,
  next: ({ model }) => paths.frequencyPlan(model),
  run: ({ params, input, ctx }) => reviseFrequencyPlan({ ...input, model: params.slug }, ctx),
});
