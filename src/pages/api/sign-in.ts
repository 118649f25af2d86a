import { z } from 'zod';
import { paths } from '~/lib/paths';
import { signInSchema } from '~/schemas/people';
import { passwordFits } from '~/server/auth/passwords';
import { openSession } from '~/server/auth/sessions';
import { forgetTries, isTooMany } from '~/server/auth/throttle';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { findSignIn } from '~/server/queries/people/find-sign-in';
import { anyone } from '~/server/rules';

export const POST = door({
  rule: anyone,
  summary: 'Sign in with e-mail address and password',
  input: signInSchema,
  output: z.object({ signedIn: z.literal(true), next: z.string() }),
  next: ({ next }) => next,
  run: async ({ input, ctx, api }) => {
    if (isTooMany(input.email, ctx.now)) {
      throw new DomainError(
        'too_many',
        'That was tried too often. Wait a quarter of an hour, or ask for a link.',
      );
    }
    const found = await findSignIn(ctx.db, input.email);
    const fits = await passwordFits(found?.passwordHash ?? null, input.password);
    if (found === null || !fits) {
      throw new DomainError('refused', 'Address and password do not belong together.', {
        password: 'Address and password do not belong together.',
      });
    }
    forgetTries(input.email);
    const cookie = await openSession(found.userId);
    api.cookies.set(cookie.name, cookie.value, cookie.attributes);
    return {
      signedIn: true as const,
      next: ownPath(input.next) ?? (found.isStaff ? paths.works() : paths.myOrders()),
    };
  },
});

/** Only a path of ours: a link from outside cannot send people on to elsewhere. */
function ownPath(next: string | undefined): string | undefined {
  return next !== undefined && /^\/(?![/\\])[^\\]*$/.test(next) ? next : undefined;
}
