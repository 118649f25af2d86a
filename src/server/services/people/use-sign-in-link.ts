import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import type { linkUseSchema } from '~/schemas/people';
import { hashPassword } from '~/server/auth/passwords';
import { tokenHash } from '~/server/auth/tokens';
import { signInLinks, userProfiles, userRoles, users, works } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import type { CallContext, WriteContext } from '~/server/write';
import { write } from '~/server/write';

type Use = z.output<typeof linkUseSchema>;

/**
 * Uses a one-time link: signs its person in, and where it is an invitation or the first owner's, takes the
 * password (and the first owner's name, address and works) with it.
 *
 * @throws DomainError `not_found` where the link is unknown, used or too old
 */
export async function useSignInLink(
  input: Use & { token: string },
  ctx: CallContext,
): Promise<{ userId: number; isStaff: boolean }> {
  const { password } = input;
  const passwordHash = password === undefined ? undefined : await hashPassword(password);
  return write(ctx, async (w) => {
    const [link] = await w.tx
      .select()
      .from(signInLinks)
      .where(eq(signInLinks.tokenHash, tokenHash(input.token)))
      .for('update');
    if (link === undefined || link.usedAt !== null || link.expiresAt <= w.now) {
      throw new DomainError('not_found', 'This link has been used or is too old. Ask for a new one.');
    }
    if (link.purpose !== 'sign_in' && passwordHash === undefined) {
      throw new DomainError('invalid', 'Choose a password.', { password: 'Choose a password.' });
    }
    const userId = link.purpose === 'first_owner' ? await makeFirstOwner(w, input) : link.userId;
    if (userId === null) throw new Error(`Sign-in link ${link.id} belongs to nobody.`);
    if (link.purpose !== 'sign_in')
      await w.tx.update(users).set({ passwordHash }).where(eq(users.id, userId));
    await w.tx.update(signInLinks).set({ usedAt: w.now, userId }).where(eq(signInLinks.id, link.id));
    await w.record({
      action: link.purpose === 'first_owner' ? 'works.found' : 'person.use_link',
      subjects: [{ type: 'user', id: userId }],
      details: { purpose: link.purpose },
    });
    const roles = await w.tx
      .select({ role: userRoles.role })
      .from(userRoles)
      .where(eq(userRoles.userId, userId));
    return { userId, isStaff: roles.length > 0 };
  });
}

async function makeFirstOwner(w: WriteContext, input: Use): Promise<number> {
  const { name, email, worksName, addressLines, timeZone = 'UTC' } = input;
  if (name === undefined || email === undefined || worksName === undefined || worksName === '') {
    throw new DomainError('invalid', 'Give your name, your e-mail address and the name of the works.');
  }
  if (addressLines === undefined) {
    const sentence = 'Give the address of the works: certificates carry it.';
    throw new DomainError('invalid', sentence, { addressLines: sentence });
  }
  const [{ insertId: userId }] = await w.tx.insert(users).values({ createdAt: w.now });
  await w.tx.insert(userProfiles).values({ userId, email, name });
  await w.tx.insert(userRoles).values({ userId, role: 'owner' });
  await w.tx.insert(works).values({
    name: worksName,
    addressLines,
    country: 'XX',
    email,
    timeZone,
    currency: 'EUR',
  });
  await addSigningKey(w);
  return userId;
}
