import { bigint, customType, datetime } from 'drizzle-orm/mysql-core';

/** Primary key of every table. */
export const id = () => bigint({ mode: 'number', unsigned: true }).autoincrement().primaryKey();

/** A column that refers to another table's {@link id}. */
export const ref = () => bigint({ mode: 'number', unsigned: true });

/** A whole number that may pass 2³¹: minor units of money, smallest units of a part. */
export const whole = () => bigint({ mode: 'number' });

/** A moment, UTC, with milliseconds. */
export const moment = () => datetime({ mode: 'date', fsp: 3 });

/** Codes and hashes: compared byte for byte, so by case too; only trailing blanks do not count. */
export const code = (length: number) =>
  customType<{ data: string }>({
    dataType: () => `varchar(${length}) character set ascii collate ascii_bin`,
  })();

/** At most 16 MiB of bytes. */
export const bytes = customType<{ data: Buffer }>({ dataType: () => 'mediumblob' });

/** Two revision letters at most: A … Z, AA … */
export const letter = () => code(2);

/** ISO 4217. */
export const currency = () => code(3);

/** ISO 3166-1 alpha-2. */
export const country = () => code(2);

/** Life of every revision: a released one does not change. */
export const revisionStates = ['draft', 'released', 'retired'] as const;
