import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import type { personInvitationSchema } from '~/schemas/people';
import { userProfiles, userRoles, users } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx, WriteContext } from '~/server/write';
import { databaseErrno, write } from '~/server/write';
import { addSignInLink } from './add-sign-in-link';

/**
 * Lets a person into the works with some roles and mails them a link by which they choose a password.
 *
 * @throws DomainError `conflict` where the address belongs to somebody of the works already
 */
export async function invitePerson(
  input: z.output<typeof personInvitationSchema>,
  ctx: Ctx,
): Promise<{ userId: number }> {
  return write(ctx, async (w) => {
    const userId = (await findBuyer(w, input.email)) ?? (await addPerson(w, input));
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

/** Whoever has ordered here keeps their account when they join the works. */
async function findBuyer(w: WriteContext, email: string): Promise<number | null> {
  const [known] = await w.tx
    .select({ userId: userProfiles.userId, role: userRoles.role, disabledAt: users.disabledAt })
    .from(userProfiles)
    .innerJoin(users, eq(users.id, userProfiles.userId))
    .leftJoin(userRoles, eq(userRoles.userId, userProfiles.userId))
    .where(eq(userProfiles.email, email))
    .for('update');
  if (known === undefined) return null;
  if (known.role !== null || known.disabledAt !== null) throw alreadyHere();
  return known.userId;
}

async function addPerson(w: WriteContext, { email, name }: { email: string; name: string }): Promise<number> {
  const [{ insertId: userId }] = await w.tx.insert(users).values({ createdAt: w.now });
  try {
    await w.tx.insert(userProfiles).values({ userId, email, name });
  } catch (error) {
    // Somebody else has just invited the same person.
    if (databaseErrno(error) !== 1062) throw error;
    throw alreadyHere();
  }
  return userId;
}

function alreadyHere(): DomainError {
  return new DomainError('conflict', 'Somebody with this e-mail address is here already.', {
    email: 'Somebody with this address is here already; change their roles in the list instead.',
  });
}
