import { index, int, json, mysqlEnum, mysqlTable, primaryKey, varchar } from 'drizzle-orm/mysql-core';
import { staffRoles } from '~/domain/people/roles';
import { code, id, moment, ref } from './columns';

/** A person who can sign in; what identifies them stands in {@link userProfiles}. */
export const users = mysqlTable('users', {
  id: id(),
  passwordHash: varchar({ length: 255 }),
  disabledAt: moment(),
  createdAt: moment().notNull(),
  version: int().notNull().default(1),
});

/** Personal data of a user: erasable, referred to by the ledger, never copied into it. */
export const userProfiles = mysqlTable('user_profiles', {
  userId: ref()
    .primaryKey()
    .references(() => users.id),
  email: varchar({ length: 254 }).notNull().unique(),
  name: varchar({ length: 120 }).notNull(),
  callSign: varchar({ length: 20 }),
});

export const userRoles = mysqlTable(
  'user_roles',
  {
    userId: ref()
      .notNull()
      .references(() => users.id),
    role: mysqlEnum(staffRoles).notNull(),
  },
  (table) => [primaryKey({ columns: [table.userId, table.role] })],
);

/** The id is the SHA-256 (hex) of the token in the cookie. */
export const sessions = mysqlTable(
  'sessions',
  {
    id: code(64).primaryKey(),
    userId: ref()
      .notNull()
      .references(() => users.id),
    expiresAt: moment().notNull(),
  },
  (table) => [index('sessions_user_id_idx').on(table.userId)],
);

/** One-time links by mail or terminal, kept as the SHA-256 (hex) of their token. */
export const signInLinks = mysqlTable('sign_in_links', {
  id: id(),
  tokenHash: code(64).notNull().unique(),
  purpose: mysqlEnum(['sign_in', 'first_owner', 'invitation']).notNull(),
  userId: ref().references(() => users.id),
  createdAt: moment().notNull(),
  expiresAt: moment().notNull(),
  usedAt: moment(),
});

/** A person's tokens for scripts, kept as the SHA-256 (hex) of the token; they open only what their scopes say. */
export const accessTokens = mysqlTable(
  'access_tokens',
  {
    id: id(),
    tokenHash: code(64).notNull().unique(),
    userId: ref()
      .notNull()
      .references(() => users.id),
    name: varchar({ length: 80 }).notNull(),
    scopes: json().$type<string[]>().notNull(),
    createdAt: moment().notNull(),
    expiresAt: moment(),
    lastUsedAt: moment(),
    revokedAt: moment(),
  },
  (table) => [index('access_tokens_user_id_idx').on(table.userId)],
);
