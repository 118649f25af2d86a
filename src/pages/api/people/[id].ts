import { z } from 'zod';
import { personChangeSchema } from '~/schemas/people';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { changePerson } from '~/server/services/people/change-person';

export const POST = door({
  rule: staff(),
  summary: 'Change a person’s roles, or shut them out',
  params: z.object({ id: z.coerce.number().int().positive() }),
  input: personChangeSchema,
  output: z.object({ userId: z.number().int() }),
  said: () => 'Changed; they sign in anew.',
  run: ({ params, input, ctx }) => changePerson({ ...input, userId: params.id }, ctx),
});
