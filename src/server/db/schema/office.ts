import { boolean, int, json, mysqlTable, varchar } from 'drizzle-orm/mysql-core';
import { code, country, currency, id, moment, ref, whole } from './columns';
import { users } from './people';

/** The works' own data: one row. */
export const works = mysqlTable('works', {
  id: id(),
  name: varchar({ length: 120 }).notNull(),
  addressLines: json().$type<string[]>().notNull(),
  country: country().notNull(),
  email: varchar({ length: 254 }).notNull(),
  timeZone: varchar({ length: 64 }).notNull(),
  currency: currency().notNull(),
  testerIsNotBuilder: boolean().notNull().default(false),
  version: int().notNull().default(1),
});

/** Running numbers, drawn under a row lock so that none is given twice or left out. */
export const numberSeries = mysqlTable('number_series', {
  series: code(40).primaryKey(),
  nextValue: whole().notNull(),
});

/** The works' Ed25519 keys; a retired one keeps verifying what it signed. */
export const signingKeys = mysqlTable('signing_keys', {
  id: id(),
  keyId: code(64).notNull().unique(),
  publicKey: varchar({ length: 200 }).notNull(),
  sealedPrivateKey: varchar({ length: 1000 }).notNull(),
  createdAt: moment().notNull(),
  createdBy: ref().references(() => users.id),
  retiredAt: moment(),
});
