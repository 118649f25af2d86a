import { DrizzleMySQLAdapter } from '@lucia-auth/adapter-drizzle';
import { and, eq, ne } from 'drizzle-orm';
import { Lucia, TimeSpan } from 'lucia';
import type { Cookie } from 'lucia';
import type { StaffRole } from '~/domain/people/roles';
import { db } from '~/server/db/client';
import type { Db } from '~/server/db/client';
import { sessions, userProfiles, userRoles, users } from '~/server/db/schema';
import { newToken, tokenHash } from './tokens';

declare module 'lucia' {
  interface Register {
    Lucia: ReturnType<typeof luciaOn>;
    UserId: number;
  }
}

/** The signed-in person, as pages and doors see them. */
export interface SignedIn {
  id: number;
  name: string;
  email: string;
  callSign: string | null;
  /** Empty for a buyer. */
  roles: StaffRole[];
}

/** `__Host-` needs the Secure attribute, which browsers also accept on loopback without TLS. */
export const sessionCookieName = '__Host-session';

function luciaOn(database: Db) {
  return new Lucia(new DrizzleMySQLAdapter(database, sessions, users), {
    sessionExpiresIn: new TimeSpan(30, 'd'),
    sessionCookie: { name: sessionCookieName, attributes: { secure: true, sameSite: 'lax', path: '/' } },
  });
}

let shared: ReturnType<typeof luciaOn> | undefined;

function lucia() {
  shared ??= luciaOn(db());
  return shared;
}

/** Opens a session and gives the cookie that carries its token; the database keeps only the token's hash. */
export async function openSession(userId: number): Promise<Cookie> {
  const token = newToken();
  await lucia().createSession(userId, {}, { sessionId: tokenHash(token) });
  return cookieOf(token);
}

/** Ends the session of a cookie and gives the cookie that clears it. */
export async function endSession(token: string): Promise<Cookie> {
  await lucia().invalidateSession(tokenHash(token));
  return lucia().createBlankSessionCookie();
}

/** Ends every session of a person, for a change of roles or password; the one given stays. */
export async function endOtherSessions(userId: number, keptToken?: string): Promise<void> {
  const others = eq(sessions.userId, userId);
  await db()
    .delete(sessions)
    .where(keptToken === undefined ? others : and(others, ne(sessions.id, tokenHash(keptToken))));
}

/**
 * The person behind a session cookie.
 *
 * @returns null where the session is unknown, has expired, or its person is no longer let in; `renewed`
 * is the cookie to set again when the session was prolonged.
 */
export async function personOf(token: string): Promise<{ person: SignedIn; renewed: Cookie | null } | null> {
  const { session } = await lucia().validateSession(tokenHash(token));
  if (session === null) return null;
  const person = await letIn(session.userId);
  return person === null ? null : { person, renewed: session.fresh ? cookieOf(token) : null };
}

/** A person by id, with their roles; null where they are shut out. */
export async function letIn(userId: number): Promise<SignedIn | null> {
  const rows = await db()
    .select({
      id: users.id,
      disabledAt: users.disabledAt,
      name: userProfiles.name,
      email: userProfiles.email,
      callSign: userProfiles.callSign,
      role: userRoles.role,
    })
    .from(users)
    .innerJoin(userProfiles, eq(userProfiles.userId, users.id))
    .leftJoin(userRoles, eq(userRoles.userId, users.id))
    .where(eq(users.id, userId));
  const [first] = rows;
  if (first === undefined || first.disabledAt !== null) return null;
  const roles = rows.flatMap(({ role }) => (role === null ? [] : [role]));
  return { id: first.id, name: first.name, email: first.email, callSign: first.callSign, roles };
}

function cookieOf(token: string): Cookie {
  return lucia().createSessionCookie(token);
}
