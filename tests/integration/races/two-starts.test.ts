import { spawn } from 'node:child_process';
import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import mysql, { type Connection, type RowDataPacket } from 'mysql2/promise';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { env } from '~/server/env';
import { root } from '../../../src/server/run/root';

const script = `
  import { migrateDatabase } from './src/server/db/migrate.ts';
  await migrateDatabase(process.env.DATABASE_URL, 'drizzle');
`;

/** Migrates a database in a process of its own, and gives its exit code and what it said. */
function migrateInProcess(url: string): Promise<{ code: number | null; said: string }> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', script], {
      cwd: root,
      stdio: ['ignore', 'ignore', 'pipe'],
      env: { ...process.env, DATABASE_URL: url },
    });
    let said = '';
    child.stderr.on('data', (chunk: Buffer) => (said += chunk.toString()));
    child.once('error', reject);
    child.once('exit', (code) => resolve({ code, said }));
  });
}

const address = new URL(env().databaseUrl);
const name = `${address.pathname.slice(1)}_starts`;
let connection: Connection;

beforeAll(async () => {
  connection = await mysql.createConnection(new URL('/', address).href);
  await connection.query(`CREATE DATABASE \`${name}\` CHARACTER SET utf8mb4`);
});

afterAll(async () => {
  await connection.query(`DROP DATABASE IF EXISTS \`${name}\``);
  await connection.end();
});

it('lets three starts at once bring one empty database to the newest schema', async () => {
  const url = new URL(`/${name}`, address).href;
  const starts = await Promise.all([migrateInProcess(url), migrateInProcess(url), migrateInProcess(url)]);
  expect(starts).toEqual([
    { code: 0, said: '' },
    { code: 0, said: '' },
    { code: 0, said: '' },
  ]);
  const [rows] = await connection.query<RowDataPacket[]>(
    `SELECT COUNT(*) AS n FROM \`${name}\`.__drizzle_migrations`,
  );
  const migrations = readdirSync(join(root, 'drizzle')).filter((file) => file.endsWith('.sql'));
  expect(Number(rows[0]?.['n'])).toBe(migrations.length);
}, 60_000);
