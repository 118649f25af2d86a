import { z } from 'zod';
import { worksSchema } from '~/schemas/people';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { changeWorks } from '~/server/services/office/change-works';

export const POST = door({
  rule: staff(),
  summary: 'Change the works’ own data',
  input: worksSchema,
  output: z.object({ changed: z.literal(true) }),
  said: () => 'The works’ data is changed.',
  run: ({ input, ctx }) => changeWorks(input, ctx),
});
