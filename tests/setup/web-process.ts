import { spawn, type ChildProcess } from 'node:child_process';
import { closeSync, mkdtempSync, openSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ensureBuild } from '../../src/server/run/build';
import { freePort } from '../../src/server/run/ports';
import { root } from '../../src/server/run/root';

/** A built web server in a process of its own; nothing starts it again. */
export interface WebProcess {
  /** Its address, without a slash at the end. */
  url: string;
  stop(): Promise<void>;
  /** Ends it as a power cut does. */
  kill(): Promise<void>;
}

const graceMs = 5000;

/** One for all servers of a test run, even where the sources change while it runs. */
let build: Promise<string> | undefined;

function gone(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return Promise.resolve();
  return new Promise((resolve) => child.once('exit', () => resolve()));
}

async function startWebProcess(buildFolder: string, logFolder: string): Promise<WebProcess> {
  const port = await freePort();
  const url = `http://localhost:${port}`;
  const log = openSync(join(logFolder, `web-${port}.log`), 'a', 0o600);
  const child = spawn(process.execPath, ['--import', 'tsx', join(root, 'src/server/run/web.ts')], {
    cwd: root,
    stdio: ['ignore', log, log, 'ipc'],
    env: {
      ...process.env,
      NODE_ENV: 'production',
      LOG_LEVEL: 'warn',
      PORT: String(port),
      RIGWRIGHT_BASE_URL: url,
      RIGWRIGHT_BUILD: buildFolder,
    },
  });
  closeSync(log);
  await new Promise<void>((resolve, reject) => {
    child.once('message', () => resolve());
    child.once('error', reject);
    child.once('exit', (code) =>
      reject(new Error(`A web server ended with ${code ?? 'a signal'}; look into ${logFolder}.`)),
    );
  });
  return {
    url,
    async stop() {
      child.kill('SIGTERM');
      const limit = setTimeout(() => child.kill('SIGKILL'), graceMs);
      await gone(child);
      clearTimeout(limit);
    },
    async kill() {
      child.kill('SIGKILL');
      await gone(child);
    },
  };
}

/**
 * Starts web servers from the production build, all on the settings of this process (and so on one
 * database), as several instances run in production.
 */
export async function startWebProcesses(count: number): Promise<WebProcess[]> {
  build ??= ensureBuild(new AbortController().signal);
  const buildFolder = await build;
  const logFolder = mkdtempSync(join(tmpdir(), 'rigwright-web-'));
  return Promise.all(Array.from({ length: count }, () => startWebProcess(buildFolder, logFolder)));
}
