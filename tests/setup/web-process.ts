import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ensureBuild } from '../../src/server/run/build';
import { freePort } from '../../src/server/run/ports';
import { supervise } from '../../src/server/run/processes';

/** A built web server in a process of its own. */
export interface WebProcess {
  /** Its address, without a slash at the end. */
  url: string;
  stop(): Promise<void>;
}

/**
 * Starts web servers from the production build, all on the settings of this process (and so on one
 * database), as several instances run in production.
 */
export async function startWebProcesses(count: number): Promise<WebProcess[]> {
  const buildFolder = await ensureBuild(new AbortController().signal);
  const logFolder = mkdtempSync(join(tmpdir(), 'rigwright-web-'));
  const starts = Array.from({ length: count }, async () => {
    const port = await freePort();
    const url = `http://localhost:${port}`;
    const supervised = supervise({
      name: 'web',
      env: {
        ...process.env,
        NODE_ENV: 'production',
        PORT: String(port),
        RIGWRIGHT_BASE_URL: url,
        RIGWRIGHT_BUILD: buildFolder,
      },
      logFolder,
      onRestart: () => undefined,
    });
    await supervised.ready;
    return { url, stop: () => supervised.stop(5000) };
  });
  return Promise.all(starts);
}
