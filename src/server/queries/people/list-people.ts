import { asc, eq } from 'drizzle-orm';
import type { StaffRole } from '~/domain/people/roles';
import type { Reader } from '~/server/db/client';
import { userProfiles, userRoles, users } from '~/server/db/schema';

export interface PersonRow {
  id: number;
  name: string;
  email: string;
  roles: StaffRole[];
  hasPassword: boolean;
  isDisabled: boolean;
  version: number;
}

/** Everybody with a role in the works, and who was shut out of it, by name. Buyers are not listed. */
export async function listPeople(reader: Reader): Promise<PersonRow[]> {
  const rows = await reader
    .select({
      id: users.id,
      name: userProfiles.name,
      email: userProfiles.email,
      role: userRoles.role,
      passwordHash: users.passwordHash,
      disabledAt: users.disabledAt,
      version: users.version,
    })
    .from(users)
    .innerJoin(userProfiles, eq(userProfiles.userId, users.id))
    .leftJoin(userRoles, eq(userRoles.userId, users.id))
    .orderBy(asc(userProfiles.name), asc(users.id));
  const people = new Map<number, PersonRow>();
  for (const { role, passwordHash, disabledAt, ...row } of rows) {
    const person = people.get(row.id) ?? {
      ...row,
      roles: [],
      hasPassword: passwordHash !== null,
      isDisabled: disabledAt !== null,
    };
    if (role !== null) person.roles.push(role);
    people.set(row.id, person);
  }
  return [...people.values()].filter(({ roles, isDisabled }) => roles.length > 0 || isDisabled);
}
