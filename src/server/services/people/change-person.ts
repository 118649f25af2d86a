import { and, eq, isNull, ne } from 'drizzle-orm';
import type { z } from 'zod';
import type { personChangeSchema } from '~/schemas/people';
import { sessions, userRoles, users } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx, WriteContext } from '~/server/write';
import { write } from '~/server/write';

/**
 * Changes a person's roles, or shuts them out. Their sessions end, so that what is open follows at once.
 *
 * @throws DomainError `conflict` where nobody would be owner any more, or another has changed it meanwhile
 */
export async function changePerson(
  input: z.output<typeof personChangeSchema> & { userId: number },
  ctx: Ctx,
): Promise<{ userId: number }> {
  const { userId, roles, disabled } = input;
  return write(ctx, async (w) => {
    const [user] = await w.tx.select().from(users).where(eq(users.id, userId)).for('update');
    if (user === undefined) throw new DomainError('not_found', 'There is no such person.');
    if (user.version !== input.version) {
      throw new DomainError('conflict', 'Somebody else has changed this person meanwhile. Look again.');
    }
    if ((disabled || !roles.includes('owner')) && !(await hasOtherOwner(w, userId))) {
      throw new DomainError('conflict', 'Somebody has to stay owner. Make another person owner first.');
    }
    const before = await w.tx
      .select({ role: userRoles.role })
      .from(userRoles)
      .where(eq(userRoles.userId, userId));
    await w.tx.delete(userRoles).where(eq(userRoles.userId, userId));
    if (roles.length > 0) await w.tx.insert(userRoles).values(roles.map((role) => ({ userId, role })));
    await w.tx
      .update(users)
      .set({ disabledAt: disabled ? (user.disabledAt ?? w.now) : null, version: user.version + 1 })
      .where(eq(users.id, userId));
    await w.tx.delete(sessions).where(eq(sessions.userId, userId));
    await w.record({
      action: 'person.change',
      subjects: [{ type: 'user', id: userId }],
      details: {
        roles: { from: before.map(({ role }) => role), to: roles },
        disabled: { from: user.disabledAt !== null, to: disabled },
      },
    });
    return { userId };
  });
}

async function hasOtherOwner(w: WriteContext, userId: number): Promise<boolean> {
  const owners = await w.tx
    .select({ id: users.id })
    .from(userRoles)
    .innerJoin(users, eq(users.id, userRoles.userId))
    .where(and(eq(userRoles.role, 'owner'), isNull(users.disabledAt), ne(users.id, userId)))
    .for('update');
  return owners.length > 0;
}
