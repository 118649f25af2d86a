// The entry of every npm script: plain Node.js without packages, because it runs before they are there.
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { ensureDebianPackages, ensureNpmPackages } from './install.mjs';
import { PlainError, sayFailure } from './step.mjs';

const root = join(dirname(fileURLToPath(import.meta.url)), '..', '..', '..');

/** @type {import('./install.mjs').DebianPackage[]} */
const forDatabase = ['mariadb-server-core', 'mariadb-client'];
/** @type {import('./install.mjs').DebianPackage[]} */
const forTests = [...forDatabase, 'chromium', 'poppler-utils', 'qpdf', 'openssl'];

/** @type {Record<string, { script: string, debian: import('./install.mjs').DebianPackage[] }>} */
const commands = {
  start: { script: 'src/server/run/start.ts', debian: process.env['DATABASE_URL'] ? [] : forDatabase },
  test: { script: 'tests/setup/run-tests.ts', debian: forTests },
  check: { script: 'tests/setup/run-checks.ts', debian: [] },
  'check:checks': { script: 'tests/setup/check-the-checks.ts', debian: forDatabase },
  shots: { script: 'tests/setup/shots.ts', debian: forTests },
  bench: { script: 'tests/setup/bench.ts', debian: forTests },
};

/** Refuses a Node.js on which the packages do not run. */
function checkNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
  if (major === 20 ? minor >= 11 : major >= 22) return;
  throw new PlainError(
    `This is Node.js ${process.versions.node}; install Node.js 20 (20.11 or later) or 22 and start again.`,
  );
}

async function main() {
  checkNode();
  const command = commands[process.argv[2] ?? ''];
  if (!command) throw new PlainError(`Name one of these commands: ${Object.keys(commands).join(', ')}.`);
  process.chdir(root);
  process.env['ASTRO_TELEMETRY_DISABLED'] = '1';
  await ensureNpmPackages(root);
  await ensureDebianPackages(root, command.debian);
  // Before any package is read: React and Astro choose their fast build by it.
  if (process.argv[2] === 'start') process.env['NODE_ENV'] = 'production';
  const { register } = await import('tsx/esm/api');
  register();
  process.argv.splice(1, 2, join(root, command.script));
  await import(pathToFileURL(join(root, command.script)).href);
}

main().catch((error) => {
  sayFailure(error);
  process.exitCode = 1;
});
