import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright/test';
import { freePort } from '../../src/server/run/ports';
import { root } from '../../src/server/run/root';
import { textOf } from '../pdf/tools';
import { expect, test } from './fixtures';

/** Fields that the way from an empty works to a certificate shows at most; a group of ticks counts as one. */
const mostFieldsShown = 28;
/** Fields that have to be filled on it, readings left out. */
const mostFieldsFilled = 16;

interface EmptyWorks {
  firstOwnerLink: string;
  stop: () => Promise<void>;
}

/** Starts the application as `npm start` does, on an empty database of its own. */
async function startEmptyWorks(): Promise<EmptyWorks> {
  const dataFolder = mkdtempSync(join(tmpdir(), 'rigwright-empty-'));
  const ours = /^(RIGWRIGHT_|STRIPE_|SMTP_|MAIL_FROM$|DATABASE_URL$|LOG_LEVEL$|NODE_ENV$)/;
  const variables = Object.fromEntries(Object.entries(process.env).filter(([name]) => !ours.test(name)));
  const child = spawn(process.execPath, [join(root, 'src/server/run/bootstrap.mjs'), 'start'], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      ...variables,
      PORT: String(await freePort()),
      RIGWRIGHT_DATA: dataFolder,
      RIGWRIGHT_DEMO: '0',
    },
  });
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  const stop = async () => {
    child.kill('SIGTERM');
    await ended;
    rmSync(dataFolder, { recursive: true, force: true });
  };
  let said = '';
  const firstOwnerLink = await new Promise<string>((resolve, reject) => {
    const hear = (chunk: Buffer) => {
      said += chunk.toString();
      const [link] = /http:\/\/\S+\/sign-in\/\S+/.exec(said) ?? [];
      if (link !== undefined) resolve(link);
    };
    child.stdout.on('data', hear);
    child.stderr.on('data', hear);
    child.once('exit', () => reject(new Error(`The empty works did not start:\n${said}`)));
  });
  return { firstOwnerLink, stop };
}

/** What a page asks for: the fields of its main part, each group of ticks once. */
async function fieldsAsked(page: Page): Promise<number> {
  return page.locator('main').evaluate((main) => {
    const fields = main.querySelectorAll('input:not([type=hidden]):not([type=file]), select, textarea');
    const names = [...fields].map((field) =>
      field.matches('[type=checkbox], [type=radio]')
        ? `group of ${field.getAttribute('name') ?? ''}`
        : field.id || (field.getAttribute('name') ?? ''),
    );
    return new Set(names).size;
  });
}

test('the bench alone: from an empty works to a certificate', async ({ browser, watch }) => {
  test.setTimeout(480_000);
  const works = await startEmptyWorks();
  const context = await browser.newContext();
  try {
    const page = watch(await context.newPage());
    let shown = 0;
    let filled = 0;
    const fill = async (label: string | RegExp, text: string) => {
      filled += 1;
      await page.getByLabel(label, typeof label === 'string' ? { exact: true } : {}).fill(text);
    };
    const count = async () => {
      shown += await fieldsAsked(page);
    };

    await test.step('the first owner founds the works', async () => {
      await page.goto(works.firstOwnerLink);
      await count();
      await fill('Name of the works', 'Quiet Radio Works');
      await fill('Its address', '1 Quiet Lane\nNowhere');
      await fill('Your name', 'Quill Quinn');
      await fill('Your e-mail address', 'quill@quiet.example');
      await fill('Choose a password', 'a quiet long password');
      await page.getByRole('button', { name: 'Found the works' }).click();
      await expect(page.getByRole('heading', { name: 'Test a rig' })).toBeVisible();
      const stations = page.getByRole('navigation', { name: 'Stations' }).getByRole('link');
      await expect(stations).toHaveText(['Bench', 'Office']);
    });

    await test.step('a model is drawn up with its test plan', async () => {
      await page.getByRole('link', { name: 'Draw up the model' }).click();
      await count();
      await fill('Name', 'Quiet 40');
      await fill('Rated power', '5 W');
      filled += 1;
      await page.getByRole('checkbox', { name: '40 m' }).check();
      await fill('Current, key down, at most', '900 mA');
      await page.getByRole('button', { name: 'Draw up the model' }).click();
      await expect(page.getByText('Quiet 40 is drawn up')).toBeVisible();
    });

    await test.step('one instrument is entered by its data sheet', async () => {
      await page.getByRole('link', { name: 'Enter what you measure with' }).click();
      await count();
      await fill('What it is', 'Analyser with power head');
      await fill(/^Levels within/, '0.5');
      await fill(/^Lost before it/, '40');
      await fill(/^Ratios within/, '1.5');
      await fill(/^Its own products/, '85');
      await fill(/^Currents within/, '1');
      await page.getByRole('button', { name: 'Enter it' }).click();
      await expect(page.getByText('M-1 and the path P-1 can be chosen')).toBeVisible();
    });

    await test.step('a serial number that is typed opens its final test', async () => {
      await page.getByRole('link', { name: 'Type the serial number' }).click();
      await count();
      await fill('Serial number', 'q40-0001');
      await page.getByRole('button', { name: 'Open its final test' }).click();
      await expect(page.getByRole('heading', { name: 'Final test' })).toBeVisible();
    });
    expect(shown, 'fields shown on the way').toBeLessThanOrEqual(mostFieldsShown);
    expect(filled, 'fields filled on the way').toBeLessThanOrEqual(mostFieldsFilled);

    await test.step('the readings are taken, and the run is closed', async () => {
      // What is typed before the grid has its script is nobody's yet.
      await expect(page.locator('astro-island[ssr]')).toHaveCount(0);
      const grid = page.getByRole('region', { name: 'Readings by band and quantity' });
      // 5.01 W through 40 dB, at 13.8 V.
      for (const [name, text] of [
        ['40 m, power', '-3.00 dBm'],
        ['40 m, 2nd harmonic', '58.4'],
        ['40 m, 3rd harmonic', '63.1'],
        ['40 m, current, key down', '802 mA'],
      ] as const) {
        const cell = page.getByLabel(name, { exact: true });
        await cell.fill(text);
        await cell.press('Enter');
        const mark = grid.locator('label', { has: cell });
        await expect(mark.locator('[data-verdict]')).toHaveAttribute('data-verdict', 'pass');
      }
      await expect(page.getByText('4 of 4 readings in')).toBeVisible();
      await page.getByRole('button', { name: 'Close the run' }).click();
      await page.getByRole('dialog').getByRole('button', { name: 'Close the run' }).click();
      await expect(page.getByText('Run 1: passed')).toBeVisible();
    });

    await test.step('the certificate is issued, and its PDF says who measured what', async () => {
      await page.getByRole('button', { name: 'Issue the certificate' }).click();
      await page.getByRole('link', { name: /^Certificate TC-/ }).click();
      const pdfLink = page.getByRole('link', { name: /PDF/ });
      await expect(async () => {
        await page.reload();
        await expect(pdfLink.first()).toBeVisible({ timeout: 500 });
      }).toPass({ timeout: 30_000 });
      const href = (await pdfLink.first().getAttribute('href')) ?? '';
      const answer = await page.request.get(new URL(href, page.url()).href);
      expect(answer.status()).toBe(200);
      const text = textOf(await answer.body());
      for (const part of ['Quiet Radio Works', '1 Quiet Lane', 'Q40-0001', 'Quill Quinn', '−58.4', '802']) {
        expect(text).toContain(part);
      }
    });
    process.stdout.write(`the bench alone: ${shown} fields shown, ${filled} filled\n`);
  } finally {
    await context.close();
    await works.stop();
  }
});
