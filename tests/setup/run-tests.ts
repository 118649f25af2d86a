import { spawn } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, readdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { startApplication } from '../../src/server/run/application';
import { isRunning } from '../../src/server/run/is-running';
import { lifetime } from '../../src/server/run/lifetime';
import { freePort } from '../../src/server/run/ports';
import { root } from '../../src/server/run/root';
import { sayFailure, step } from '../../src/server/run/step.mjs';
import { sum, tallyPlaywright, type PlaywrightReport, type Tally } from './tally';

const life = lifetime(60_000, () => step('Stopping'));
const testFolder = join(root, '.test');
mkdirSync(testFolder, { recursive: true });
const runFolder = mkdtempSync(join(testFolder, `run-${process.pid}-`));

/** Settings of a running application must not reach the tests: they have a database and keys of their own. */
function cleanVariables(): NodeJS.ProcessEnv {
  const ours = /^(RIGWRIGHT_|STRIPE_|SMTP_|MAIL_FROM$|DATABASE_URL$|PORT$|LOG_LEVEL$|NODE_ENV$)/;
  return Object.fromEntries(
    Object.entries(process.env).filter(([name]) => name === 'RIGWRIGHT_SAMPLES' || !ours.test(name)),
  );
}

function removeLeftFolders(): void {
  for (const name of readdirSync(testFolder)) {
    const pid = /^run-(\d+)-/.exec(name)?.[1];
    if (pid && !isRunning(Number(pid))) rmSync(join(testFolder, name), { recursive: true, force: true });
  }
}

function run(script: string, args: string[], variables: NodeJS.ProcessEnv): Promise<number | null> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(root, 'node_modules', script), ...args], {
      cwd: root,
      stdio: ['ignore', 'inherit', 'inherit'],
      env: variables,
    });
    life.onStop(async () => {
      if (child.exitCode === null && child.signalCode === null) child.kill('SIGTERM');
      await Promise.resolve();
    });
    child.once('error', reject);
    child.once('exit', resolve);
  });
}

/** What a runner reported; a runner that failed without saying which test did counts as one failure. */
function readTally(code: number | null, file: string, read: (text: string) => Tally): Tally {
  if (!existsSync(file)) return { passed: 0, failed: 1, skipped: [] };
  const tally = read(readFileSync(file, 'utf8'));
  return code !== 0 && tally.failed === 0 ? { ...tally, failed: 1 } : tally;
}

async function runVitest(args: string[]): Promise<Tally> {
  const file = join(runFolder, 'vitest.json');
  const reporters = ['--reporter=default', `--reporter=${join(root, 'tests/setup/vitest-reporter.ts')}`];
  const variables = { ...cleanVariables(), RIGWRIGHT_TALLY: file };
  const code = await run('vitest/vitest.mjs', ['run', ...reporters, ...args], variables);
  return readTally(code, file, (text) => JSON.parse(text) as Tally);
}

async function runPlaywright(args: string[]): Promise<Tally> {
  const file = join(runFolder, 'playwright.json');
  const dataFolder = join(runFolder, 'data');
  const application = await startApplication({
    variables: {
      ...cleanVariables(),
      PORT: String(await freePort()),
      RIGWRIGHT_DATA: dataFolder,
      RIGWRIGHT_DEMO: '1',
    },
    signal: life.signal,
    onStop: life.onStop,
    onFatal: (error) => {
      sayFailure(error);
      void life.end(1);
    },
  });
  const code = await run('playwright/cli.js', ['test', ...args], {
    ...application.variables,
    RIGWRIGHT_E2E_URL: application.baseUrl.origin,
    RIGWRIGHT_E2E_MAILBOX: application.mailboxPage,
    RIGWRIGHT_E2E_PAYMENTS: application.paymentsPage,
    RIGWRIGHT_E2E_REPORT: file,
  });
  return readTally(code, file, (text) => tallyPlaywright(JSON.parse(text) as PlaywrightReport));
}

function hasBrowserTests(): boolean {
  const folder = join(root, 'tests/e2e');
  return (
    existsSync(folder) &&
    readdirSync(folder, { recursive: true }).some((name) => String(name).endsWith('.e2e.ts'))
  );
}

async function runAll(args: string[]): Promise<Tally> {
  const isBrowserTest = (arg: string): boolean => arg.includes('e2e');
  const named = args.filter((arg) => !arg.startsWith('-'));
  const tallies: Tally[] = [];
  if (named.length === 0 || named.some((arg) => !isBrowserTest(arg))) {
    step('Running the tests of domain, services and API');
    tallies.push(await runVitest(args.filter((arg) => !isBrowserTest(arg))));
  }
  if (hasBrowserTests() && (named.length === 0 || named.some(isBrowserTest))) {
    step('Starting the application for the tests in the browser');
    const browserArgs = args.filter((arg) => isBrowserTest(arg) || arg.startsWith('-'));
    tallies.push(await runPlaywright(browserArgs));
  }
  return sum(tallies);
}

let total: Tally = { passed: 0, failed: 1, skipped: [] };
removeLeftFolders();
try {
  total = await runAll(process.argv.slice(2));
} catch (error) {
  if (!life.signal.aborted) sayFailure(error);
}
for (const { name, reason } of total.skipped) process.stdout.write(`skipped: ${name} (${reason})\n`);
const isGreen = total.failed === 0 && total.passed > 0;
// The logs of a failed run stay until the next run.
if (isGreen) life.onStop(() => Promise.resolve(rmSync(runFolder, { recursive: true, force: true })));
process.once('exit', () => {
  process.stdout.write(`${total.passed} passed, ${total.failed} failed, ${total.skipped.length} skipped\n`);
});
await life.end(isGreen ? 0 : 1);
