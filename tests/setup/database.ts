import { join } from 'node:path';
import mysql, { type Connection, type RowDataPacket } from 'mysql2/promise';
import { afterAll, beforeAll, beforeEach } from 'vitest';
import { env } from '~/server/env';
import { db, type Db } from '~/server/db/client';
import { migrateDatabase } from '~/server/db/migrate';
import { root } from '../../src/server/run/root';

async function createDatabase(url: string): Promise<void> {
  const address = new URL(url);
  const name = address.pathname.slice(1);
  address.pathname = '/';
  const connection = await mysql.createConnection(address.href);
  await connection.query(`CREATE DATABASE IF NOT EXISTS \`${name}\` CHARACTER SET utf8mb4`);
  await connection.end();
}

async function listTables(connection: Connection): Promise<string[]> {
  const [rows] = await connection.query<RowDataPacket[]>(
    "SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE'",
  );
  return rows.map((row) => String(row['name'])).filter((name) => !name.startsWith('__drizzle'));
}

/** Empties the tables that have rows; truncating passes the triggers that keep entries from being deleted. */
async function emptyTables(connection: Connection, tables: readonly string[]): Promise<void> {
  const [rows] = await connection.query<RowDataPacket[]>(
    tables
      .map((table) => `SELECT '${table}' AS name FROM DUAL WHERE EXISTS (SELECT 1 FROM \`${table}\`)`)
      .join(' UNION ALL '),
  );
  for (const row of rows) await connection.query(`TRUNCATE TABLE \`${String(row['name'])}\``);
}

/**
 * Gives the tests of a file a migrated database of the worker's own, empty at the beginning of each test.
 * Code that asks for `db()` gets the same pool.
 */
export function testDatabase(): { readonly db: Db; readonly url: string } {
  const url = env().databaseUrl;
  let connection: Connection | undefined;
  let tables: string[] = [];
  beforeAll(async () => {
    await createDatabase(url);
    await migrateDatabase(url, join(root, 'drizzle'));
    connection = await mysql.createConnection(url);
    await connection.query('SET FOREIGN_KEY_CHECKS = 0');
    tables = await listTables(connection);
  });
  beforeEach(async () => {
    if (connection) await emptyTables(connection, tables);
  });
  afterAll(async () => {
    await connection?.end();
    await db().close();
  });
  return {
    get db() {
      return db();
    },
    url,
  };
}
