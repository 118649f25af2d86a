import { join } from 'node:path';
import mysql, { type Connection, type RowDataPacket } from 'mysql2/promise';
import type { TestProject } from 'vitest/node';
import { isRunning } from '../../src/server/run/is-running';
import { openPrivateDatabase } from '../../src/server/run/private-database';
import { root } from '../../src/server/run/root';

declare module 'vitest' {
  interface ProvidedContext {
    /** Address of the test server's database of this run, less the worker's number. */
    databasePrefix: string;
  }
}

/** Drops the databases of test runs that have ended without doing so, and of this one. */
async function dropDatabases(connection: Connection): Promise<void> {
  const [rows] = await connection.query<RowDataPacket[]>(
    "SELECT schema_name AS name FROM information_schema.schemata WHERE schema_name LIKE 'rigwright\\_test\\_%'",
  );
  for (const row of rows) {
    const name = String(row['name']);
    const pid = Number(name.split('_')[2]);
    if (pid === process.pid || !isRunning(pid)) await connection.query(`DROP DATABASE IF EXISTS \`${name}\``);
  }
}

/** Holds the tests' own database server; runs in the same clone share it, each with databases of its own. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const server = await openPrivateDatabase({ folder: join(root, '.test', 'database'), durable: false });
  const connection = await mysql.createConnection(server.url(''));
  await dropDatabases(connection);
  project.provide('databasePrefix', server.url(`rigwright_test_${process.pid}_`));
  return async () => {
    await dropDatabases(connection);
    await connection.end();
    await server.release();
  };
}
