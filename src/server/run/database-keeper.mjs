// Holds one private MariaDB for all processes that use its folder. Every user keeps a connection to the
// keeper's socket open; when the last one has gone, however it ended, the keeper stops the server and ends.
import { spawn } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { chmod, mkdir, open, readFile, readlink, rename, rm, stat, writeFile } from 'node:fs/promises';
import { connect, createServer } from 'node:net';
import { join } from 'node:path';
import { socketName } from './machine-lock.mjs';

const folder = process.argv[2] ?? '';
const durable = process.argv[3] !== 'fast';
const dataFolder = join(folder, 'data');
const pidFile = join(folder, 'mariadbd.pid');
const passwordFile = join(folder, 'password');
const logFile = join(folder, 'mariadb.log');
const searchPath = { ...process.env, PATH: `${process.env['PATH'] ?? ''}:/usr/sbin:/sbin` };
const asRoot = process.getuid?.() === 0 ? ['--user=root'] : [];

/** @type {Set<import('node:net').Socket>} */
const users = new Set();
/** @type {import('node:child_process').ChildProcess | undefined} */
let database;
/** @type {string | undefined} */
let answer;
let stopping = false;

/** @param {number} ms */
const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/** @param {string} path */
const exists = (path) =>
  stat(path).then(
    () => true,
    () => false,
  );

/** A port that nobody listens on now. @returns {Promise<number>} */
function freePort() {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => resolve(typeof address === 'object' && address ? address.port : 0));
    });
  });
}

/**
 * Whether the server greets on the port. It listens before it has run its first statements and greets after.
 *
 * @param {number} port
 * @returns {Promise<boolean>}
 */
function greets(port) {
  return new Promise((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.once('data', () => {
      resolve(true);
      socket.destroy();
    });
    socket.once('error', () => resolve(false));
    socket.once('close', () => resolve(false));
  });
}

/** A server that outlived its keeper (killed outright) is stopped before a new one opens its files. */
async function stopLeftover() {
  const pid = Number(await readFile(pidFile, 'utf8').catch(() => '0'));
  if (!(pid > 1)) return;
  const isOurs = async () =>
    (await readlink(`/proc/${pid}/cwd`).catch(() => '')) === dataFolder &&
    (await readFile(`/proc/${pid}/comm`, 'utf8').catch(() => '')).startsWith('maria');
  if (await isOurs()) process.kill(pid, 'SIGTERM');
  for (let waited = 0; waited < 60_000 && (await isOurs()); waited += 100) await pause(100);
  await rm(pidFile, { force: true });
}

/** Makes the data folder, under another name first: a cut-off installation is never taken for a whole one. */
async function installOnce() {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  await chmod(folder, 0o700);
  if (!(await exists(passwordFile))) {
    await writeFile(passwordFile, randomBytes(24).toString('hex'), { mode: 0o600 });
  }
  if (await exists(dataFolder)) return;
  const fresh = join(folder, 'data.new');
  await rm(fresh, { recursive: true, force: true });
  await mkdir(fresh, { mode: 0o700 });
  const log = await open(logFile, 'a', 0o600);
  const installer = spawn(
    'mariadb-install-db',
    [
      '--no-defaults',
      ...asRoot,
      `--datadir=${fresh}`,
      '--auth-root-authentication-method=normal',
      '--skip-test-db',
      '--skip-name-resolve',
    ],
    { stdio: ['ignore', log.fd, log.fd], env: searchPath },
  );
  const code = await new Promise((resolve, reject) => {
    installer.once('error', reject);
    installer.once('exit', resolve);
  });
  await log.close();
  if (code !== 0) throw new Error(`mariadb-install-db ended with ${code}; see ${logFile}`);
  await rename(fresh, dataFolder);
}

/** Starts the server on a port and waits until it takes connections. @param {number} port */
async function startDatabase(port) {
  const password = (await readFile(passwordFile, 'utf8')).trim();
  const initFile = join(folder, 'init.sql');
  await writeFile(
    initFile,
    [
      `ALTER USER 'root'@'localhost' IDENTIFIED BY '${password}';`,
      "DELETE FROM mysql.global_priv WHERE User = '' OR (User = 'root' AND Host <> 'localhost');",
      'FLUSH PRIVILEGES;',
      `CREATE USER IF NOT EXISTS 'rigwright'@'127.0.0.1' IDENTIFIED BY '${password}';`,
      `ALTER USER 'rigwright'@'127.0.0.1' IDENTIFIED BY '${password}';`,
      "GRANT ALL ON `rigwright%`.* TO 'rigwright'@'127.0.0.1';",
      '',
    ].join('\n'),
    { mode: 0o600 },
  );
  const log = await open(logFile, 'a', 0o600);
  const child = spawn(
    'setpriv',
    [
      // The kernel stops the server when its keeper is killed outright.
      '--pdeathsig=TERM',
      'mariadbd',
      '--no-defaults',
      ...asRoot,
      `--datadir=${dataFolder}`,
      '--socket=mariadb.sock',
      `--pid-file=${pidFile}`,
      '--bind-address=127.0.0.1',
      `--port=${port}`,
      `--init-file=${initFile}`,
      '--skip-name-resolve',
      '--character-set-server=utf8mb4',
      '--collation-server=utf8mb4_unicode_ci',
      '--sql-mode=STRICT_ALL_TABLES,ERROR_FOR_DIVISION_BY_ZERO,NO_ENGINE_SUBSTITUTION,NO_ZERO_DATE,NO_ZERO_IN_DATE',
      '--transaction-isolation=READ-COMMITTED',
      '--default-time-zone=+00:00',
      '--max-allowed-packet=64M',
      '--max-connections=300',
      '--innodb-buffer-pool-size=128M',
      ...(durable
        ? ['--innodb-flush-log-at-trx-commit=1']
        : [
            '--innodb-flush-log-at-trx-commit=0',
            '--innodb-flush-method=nosync',
            '--skip-innodb-doublewrite',
          ]),
    ],
    { stdio: ['ignore', log.fd, log.fd], env: searchPath },
  );
  database = child;
  let ended = false;
  child.once('error', () => (ended = true));
  child.once('exit', () => {
    ended = true;
    if (answer && !stopping) void restartDatabase(port);
  });
  await log.close();
  for (let waited = 0; waited < 120_000; waited += 50) {
    if (ended) throw new Error(`mariadbd ended while starting; see ${logFile}`);
    if (await greets(port)) {
      await rm(initFile, { force: true });
      return;
    }
    await pause(50);
  }
  throw new Error(`mariadbd does not answer; see ${logFile}`);
}

/**
 * A server that fell over comes back on its port, where the users' pools find it again; one that cannot
 * takes its keeper with it, and the users see the connection end.
 *
 * @param {number} port
 */
async function restartDatabase(port) {
  process.stderr.write(`${new Date().toISOString()} mariadbd ended by itself; starting it again\n`);
  try {
    await pause(500);
    await startDatabase(port);
  } catch (error) {
    process.stderr.write(`${String(error)}\n`);
    process.exit(1);
  }
}

async function stop() {
  if (stopping) return;
  stopping = true;
  const child = database;
  if (child && child.exitCode === null && child.signalCode === null) {
    const gone = new Promise((resolve) => child.once('exit', resolve));
    child.kill('SIGTERM');
    await Promise.race([gone, pause(60_000)]);
  }
  process.exit(0);
}

const door = createServer((socket) => {
  if (stopping) {
    socket.destroy();
    return;
  }
  users.add(socket);
  socket.on('error', () => socket.destroy());
  socket.on('close', () => {
    users.delete(socket);
    if (users.size === 0 && answer) void stop();
  });
  if (answer) socket.write(answer);
});

/** @param {object} message */
function tellUsers(message) {
  answer = `${JSON.stringify(message)}\n`;
  for (const socket of users) socket.write(answer);
  if (users.size === 0) void stop();
}

// A terminal's Ctrl-C is for the users; they let go of the keeper when they are done.
process.on('SIGINT', () => undefined);
process.on('SIGHUP', () => undefined);
process.on('SIGTERM', () => void stop());
door.once('error', () => process.exit(0));
door.listen(socketName(`database ${folder}`), async () => {
  try {
    await stopLeftover();
    await installOnce();
    const port = await freePort();
    await startDatabase(port);
    tellUsers({ port });
  } catch (error) {
    tellUsers({ error: error instanceof Error ? error.message : String(error) });
    await pause(200);
    await stop();
  }
});
