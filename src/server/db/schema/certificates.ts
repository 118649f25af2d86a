import type { AnyMySqlColumn } from 'drizzle-orm/mysql-core';
import { index, longtext, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core';
import { testRuns } from './bench';
import { code, country, id, moment, ref } from './columns';
import { files } from './files';
import { signingKeys } from './office';
import { contacts } from './orders';
import { users } from './people';
import { units } from './production';

/** The issued result of a closed, passed run. Only its PDF is added later, once (a trigger refuses the rest). */
export const certificates = mysqlTable(
  'certificates',
  {
    id: id(),
    number: code(20).notNull(),
    /** Empty for the first, then A, B, … for amended ones. */
    letter: code(2).notNull().default(''),
    unitId: ref()
      .notNull()
      .references(() => units.id),
    testRunId: ref()
      .notNull()
      .references(() => testRuns.id),
    /** For whom and for where it was judged. */
    contactId: ref().references(() => contacts.id),
    destinationCountry: country(),
    code: code(12).notNull().unique(),
    /** Canonical JSON, the text that is signed. */
    statement: longtext().notNull(),
    signature: code(128).notNull(),
    signingKeyId: ref()
      .notNull()
      .references(() => signingKeys.id),
    replacesId: ref().references((): AnyMySqlColumn => certificates.id),
    reason: varchar({ length: 500 }).notNull().default(''),
    fileId: ref().references(() => files.id),
    issuedAt: moment().notNull(),
    issuedBy: ref()
      .notNull()
      .references(() => users.id),
  },
  (table) => [
    unique('certificates_number_letter_unique').on(table.number, table.letter),
    index('certificates_unit_id_idx').on(table.unitId, table.id),
    index('certificates_test_run_id_idx').on(table.testRunId),
  ],
);

/** The buyer's part of a certificate, which the paper bears and the public page does not: erasable. */
export const certificateBuyers = mysqlTable('certificate_buyers', {
  certificateId: ref()
    .primaryKey()
    .references(() => certificates.id),
  callSign: varchar({ length: 20 }),
  orderNumber: varchar({ length: 20 }),
  /** Hex; without it the digest in the signed statement cannot be guessed back to a call sign. */
  salt: code(64).notNull(),
});
