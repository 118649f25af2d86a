import { z } from 'zod';
import { paths } from '~/lib/paths';
import { linkUseSchema } from '~/schemas/people';
import { openSession } from '~/server/auth/sessions';
import { door } from '~/server/door';
import { anyone } from '~/server/rules';
import { useSignInLink } from '~/server/services/people/use-sign-in-link';

export const POST = door({
  rule: anyone,
  summary: 'Use a one-time link: sign in, accept an invitation, or found the works',
  params: z.object({ token: z.string().min(1).max(100) }),
  input: linkUseSchema,
  output: z.object({ userId: z.number().int(), isStaff: z.boolean() }),
  next: ({ isStaff }) => (isStaff ? paths.works() : paths.myOrders()),
  run: async ({ params, input, ctx, api }) => {
    const used = await useSignInLink({ ...input, token: params.token }, ctx);
    const cookie = await openSession(used.userId);
    api.cookies.set(cookie.name, cookie.value, cookie.attributes);
    return used;
  },
});
