import { z } from 'zod';
import { paths } from '~/lib/paths';
import { endSession, sessionCookieName } from '~/server/auth/sessions';
import { door } from '~/server/door';
import { anyone } from '~/server/rules';

export const POST = door({
  rule: anyone,
  summary: 'Sign out',
  output: z.object({ signedOut: z.literal(true) }),
  next: () => paths.shop(),
  run: async ({ api }) => {
    const token = api.cookies.get(sessionCookieName)?.value;
    if (token !== undefined) {
      const cookie = await endSession(token);
      api.cookies.set(cookie.name, cookie.value, cookie.attributes);
    }
    return { signedOut: true as const };
  },
});
