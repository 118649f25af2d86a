import type { StaffRole } from '~/domain/people/roles';
import { hashPassword } from '~/server/auth/passwords';
import type { Db } from '~/server/db/client';
import { userProfiles, userRoles, users } from '~/server/db/schema';

interface NewPerson {
  name?: string;
  /** Made of the name where none is given. */
  email?: string;
  /** None for a buyer. */
  roles?: StaffRole[];
  /** None for who signs in by link only. */
  password?: string;
}

/** A person with an account, and the id of it. */
export async function seedPerson(db: Db, person: NewPerson = {}): Promise<number> {
  const { name = 'Quill', roles = [], password } = person;
  const { email = `${name.toLowerCase().replaceAll(' ', '.')}@thistledown.example` } = person;
  const passwordHash = password === undefined ? null : await hashPassword(password);
  const [{ insertId: userId }] = await db.insert(users).values({ passwordHash, createdAt: new Date() });
  await db.insert(userProfiles).values({ userId, email, name });
  if (roles.length > 0) await db.insert(userRoles).values(roles.map((role) => ({ userId, role })));
  return userId;
}
