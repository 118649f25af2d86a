import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { startApplication, type Application } from '../../src/server/run/application';
import type { Lifetime } from '../../src/server/run/lifetime';
import { freePort } from '../../src/server/run/ports';
import { sayFailure } from '../../src/server/run/step.mjs';

/** An application of its own, with a fresh demo works, that goes when the command ends. */
export async function startDemoWorks(life: Lifetime): Promise<Application> {
  const dataFolder = mkdtempSync(join(tmpdir(), 'rigwright-demo-'));
  life.onStop(() => Promise.resolve(rmSync(dataFolder, { recursive: true, force: true })));
  const ours = /^(RIGWRIGHT_|STRIPE_|SMTP_|MAIL_FROM$|DATABASE_URL$|PORT$|LOG_LEVEL$|NODE_ENV$)/;
  const inherited = Object.fromEntries(Object.entries(process.env).filter(([name]) => !ours.test(name)));
  return startApplication({
    variables: {
      ...inherited,
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
}
