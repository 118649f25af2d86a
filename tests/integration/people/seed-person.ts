import type { StaffRole } from '~/domain/people/roles';
import { hashPassword } from '~/server/auth/passwords';
import type { Db } from '~/server/db/client';
import { userProfiles, userRoles, users } from '~/server/db/schema';

/** A person of the works (a buyer, without roles) with an account; the password only where one is given. */
export async function seedPerson(
  db: Db,
  { email, roles = [], password }: { email: string; roles?: StaffRole[]; password?: string },
): Promise<number> {
  const passwordHash = password === undefined ? null : await hashPassword(password);
  const [{ insertId }] = await db.insert(users).values({ passwordHash, createdAt: new Date() });
  await db.insert(userProfiles).values({ userId: insertId, email, name: 'Quill' });
  if (roles.length > 0) {
    await db.insert(userRoles).values(roles.map((role) => ({ userId: insertId, role })));
  }
  return insertId;
}
