import type { z } from 'zod';
import type { personInvitationSchema } from '~/schemas/people';
import { userProfiles, userRoles, users } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { databaseErrno, write } from '~/server/write';
import { addSignInLink } from './add-sign-in-link';

/**
 * Lets a person into the works with some roles and mails them a link by which they choose a password.
 *
 * @throws DomainError `conflict` where the address has an account already
 */
export async function invitePerson(
  input: z.output<typeof personInvitationSchema>,
  ctx: Ctx,
): Promise<{ userId: number }> {
  return write(ctx, async (w) => {
    const [{ insertId: userId }] = await w.tx.insert(users).values({ createdAt: w.now });
    try {
      await w.tx.insert(userProfiles).values({ userId, email: input.email, name: input.name });
    } catch (error) {
      if (databaseErrno(error) !== 1062) throw error;
      throw new DomainError('conflict', 'Somebody with this e-mail address is here already.', {
        email: 'Somebody with this address is here already; change their roles in the list instead.',
      });
    }
    await w.tx.insert(userRoles).values(input.roles.map((role) => ({ userId, role })));
    await addSignInLink(w, userId, 'invitation');
    await w.record({
      action: 'person.invite',
      subjects: [{ type: 'user', id: userId }],
      details: { roles: input.roles },
    });
    return { userId };
  });
}
