import { randomBytes, createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import mysql, { type Connection, type RowDataPacket } from 'mysql2/promise';
import { paths } from '~/lib/paths';
import { db } from '~/server/db/client';
import { migrateDatabase } from '~/server/db/migrate';
import { demoSignIns, seedDemo } from '~/server/run/demo/seed';
import { withLock } from './machine-lock.mjs';
import { isLoopback } from './request-guards';
import { root } from './root';
import { PlainError, step } from './step.mjs';

/** The works in the database, as far as the person at the terminal needs to know. */
export interface Works {
  /** Set while the works has no owner: opens the first-owner page once. */
  firstOwnerLink: string | undefined;
  /** Those of the demo works, where it is in the database. */
  signIns: readonly { role: string; email: string; password: string }[];
}

interface Options {
  databaseUrl: string;
  /** The database server is ours: a database that is missing or half made may be made anew. */
  isPrivate: boolean;
  dataFolder: string;
  baseUrl: URL;
  /** The setting RIGWRIGHT_DEMO. */
  demo: string | undefined;
}

/** Path of the door that takes the payment provider's events. */
export const webhookPath = paths.api.providerEvents();

async function connect(url: string): Promise<Connection> {
  try {
    return await mysql.createConnection({ uri: url, timezone: 'Z', charset: 'utf8mb4_unicode_ci' });
  } catch (error) {
    const reason =
      error instanceof Error ? error.message || String(Reflect.get(error, 'code')) : String(error);
    throw new PlainError(
      `The database cannot be reached; check DATABASE_URL and that its server runs (${reason}).`,
    );
  }
}

/** Makes the database of an address on the private server. */
async function createDatabase(url: string, replace: boolean): Promise<void> {
  const address = new URL(url);
  const name = address.pathname.slice(1);
  address.pathname = '/';
  const connection = await connect(address.href);
  try {
    if (replace) await connection.query(`DROP DATABASE IF EXISTS \`${name}\``);
    await connection.query(`CREATE DATABASE IF NOT EXISTS \`${name}\` CHARACTER SET utf8mb4`);
  } finally {
    await connection.end();
  }
}

async function countOf(connection: Connection, sql: string, values: unknown[] = []): Promise<number> {
  const [rows] = await connection.query<RowDataPacket[]>(`SELECT COUNT(*) AS n ${sql}`, values);
  return Number(rows[0]?.['n']);
}

/** A new first-owner link, in place of those that were never used; undefined once there is an owner. */
async function firstOwnerLink(connection: Connection, baseUrl: URL): Promise<string | undefined> {
  if ((await countOf(connection, "FROM user_roles WHERE role = 'owner'")) > 0) return undefined;
  const token = randomBytes(32).toString('base64url');
  await connection.query("DELETE FROM sign_in_links WHERE purpose = 'first_owner' AND used_at IS NULL");
  const now = new Date();
  const expires = new Date(now.getTime() + 24 * 3600 * 1000);
  await connection.query(
    "INSERT INTO sign_in_links (token_hash, purpose, created_at, expires_at) VALUES (?, 'first_owner', ?, ?)",
    [createHash('sha256').update(token).digest('hex'), now, expires],
  );
  return new URL(paths.signInLink(token), baseUrl).href;
}

/** Whether this start shows the demo works; never where others can reach it: its passwords are known. */
function wantsDemo({ demo, baseUrl }: Options): boolean {
  if (demo === '0') return false;
  if (isLoopback(baseUrl)) return true;
  if (demo === '1') {
    throw new PlainError(
      'Take RIGWRIGHT_DEMO=1 away: the demo works has known passwords and runs on this machine only.',
    );
  }
  return false;
}

async function seedOnce(connection: Connection, marker: string): Promise<void> {
  if ((await countOf(connection, 'FROM users')) > 0 || (await countOf(connection, 'FROM works')) > 0) return;
  step('Making the demo works');
  await writeFile(marker, '');
  await seedDemo();
  await rm(marker);
}

async function prepare(options: Options): Promise<Works> {
  const { databaseUrl, isPrivate, dataFolder, baseUrl } = options;
  const isDemo = wantsDemo(options);
  const marker = join(dataFolder, 'demo-unfinished');
  const isHalfMade = existsSync(marker);
  if (isHalfMade && !isPrivate) {
    throw new PlainError(
      `Making the demo works was cut off; empty the database, remove ${marker} and start again.`,
    );
  }
  if (isPrivate) await createDatabase(databaseUrl, isHalfMade);
  const connection = await connect(databaseUrl);
  try {
    step('Bringing the database to the newest schema');
    await migrateDatabase(databaseUrl, join(root, 'drizzle'));
    // Instances on other machines wait here.
    const [rows] = await connection.query<RowDataPacket[]>("SELECT GET_LOCK('rigwright_works', 300) AS got");
    if (rows[0]?.['got'] !== 1) {
      throw new PlainError(
        'Another start has been filling the database for minutes; start again when it is done.',
      );
    }
    if (isDemo) await seedOnce(connection, marker);
    const emails = demoSignIns.map(({ email }) => email);
    const demoPeople = await countOf(connection, 'FROM user_profiles WHERE email IN (?)', [emails]);
    return {
      firstOwnerLink: isDemo ? undefined : await firstOwnerLink(connection, baseUrl),
      signIns: isDemo && demoPeople > 0 ? demoSignIns : [],
    };
  } finally {
    await connection.end();
  }
}

/**
 * Brings the database to the newest schema and puts the demo works into it when it is empty. Instances that
 * start together wait for one another.
 *
 * @throws PlainError when the database cannot be used.
 */
export async function prepareWorks(options: Options): Promise<Works> {
  try {
    return await withLock(`works ${options.dataFolder}`, () => prepare(options));
  } finally {
    await db().close();
  }
}
