import { int, mysqlTable, primaryKey, varchar } from 'drizzle-orm/mysql-core';
import { bytes, code, id, moment, ref } from './columns';
import { users } from './people';

/** Photos, sweeps, calibrations, PDFs: found by what they hold, typed by content. */
export const files = mysqlTable('files', {
  id: id(),
  sha256: code(64).notNull().unique(),
  sizeBytes: int().notNull(),
  mediaType: code(100).notNull(),
  name: varchar({ length: 255 }).notNull(),
  createdAt: moment().notNull(),
  createdBy: ref().references(() => users.id),
});

/** A file's bytes in pieces of 1 MiB. */
export const fileChunks = mysqlTable(
  'file_chunks',
  {
    fileId: ref()
      .notNull()
      .references(() => files.id),
    position: int().notNull(),
    bytes: bytes().notNull(),
  },
  (table) => [primaryKey({ columns: [table.fileId, table.position] })],
);
