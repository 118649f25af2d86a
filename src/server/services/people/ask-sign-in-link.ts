import { and, eq, isNull } from 'drizzle-orm';
import type { z } from 'zod';
import type { askLinkSchema } from '~/schemas/people';
import { userProfiles, users } from '~/server/db/schema';
import type { CallContext } from '~/server/write';
import { write } from '~/server/write';
import { addSignInLink } from './add-sign-in-link';

/**
 * Mails a one-time sign-in link to a person. The answer is the same for an address that nobody has, so that
 * it cannot be found out who has an account.
 */
export async function askSignInLink(
  input: z.output<typeof askLinkSchema>,
  ctx: CallContext,
): Promise<{ asked: true }> {
  const [person] = await ctx.db
    .select({ id: users.id })
    .from(users)
    .innerJoin(userProfiles, eq(userProfiles.userId, users.id))
    .where(and(eq(userProfiles.email, input.email), isNull(users.disabledAt)));
  if (person !== undefined) {
    await write(ctx, async (w) => {
      await addSignInLink(w, person.id, 'sign_in');
      await w.record({ action: 'person.ask_link', subjects: [{ type: 'user', id: person.id }] });
      return null;
    });
  }
  return { asked: true };
}
