import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { chromium, type Browser, type BrowserContext } from 'playwright/test';
import { openDatabase } from '~/server/db/client';
import type { Application } from '../../src/server/run/application';
import { lifetime } from '../../src/server/run/lifetime';
import { root } from '../../src/server/run/root';
import { sayFailure, step } from '../../src/server/run/step.mjs';
import { listExamplePages, type ExamplePage } from '../e2e/page-list';
import { askForLink, signIn, waitForIslands, type Viewer } from '../e2e/people';
import { chromiumAt } from './chromium';
import { startDemoWorks } from './demo-works';
import { writeIndex, type Shot } from './shots-index';

const folder = join(root, '.shots');
const themes = ['light', 'dark'] as const;
const heights: Readonly<Record<number, number>> = { 390: 844, 800: 1280, 1024: 768, 1440: 900 };
const life = lifetime(60_000, () => step('Stopping'));

/** The widths at which a page is looked at: the desk's, and the narrow one that it is made for. */
function widthsOf({ narrow }: ExamplePage): number[] {
  return narrow === 1024 ? [1440] : [1440, narrow];
}

async function takeShots(context: BrowserContext, viewer: Viewer, pages: ExamplePage[]): Promise<Shot[]> {
  const shots: Shot[] = [];
  const page = await context.newPage();
  for (const each of pages) {
    await page.goto(each.path);
    await waitForIslands(page);
    for (const theme of themes) {
      await page.emulateMedia({ colorScheme: theme, reducedMotion: 'reduce' });
      for (const width of widthsOf(each)) {
        await page.setViewportSize({ width, height: heights[width] ?? 900 });
        const file = `${each.name}.${viewer}.${width}.${theme}.png`;
        await page.screenshot({ path: join(folder, file), fullPage: true });
        shots.push({ file, name: each.name, path: each.path, viewer, width, theme });
        process.stdout.write(`${join('.shots', file)}\n`);
      }
    }
  }
  return shots;
}

async function takeAll(browser: Browser, application: Application, wanted: readonly string[]): Promise<void> {
  const { variables } = application;
  await askForLink(application.baseUrl.origin);
  const database = openDatabase(variables['DATABASE_URL'] ?? '', 1);
  const all = await listExamplePages(database, variables['RIGWRIGHT_SECRET'] ?? '');
  await database.close();
  const pages = all.filter(({ name }) => wanted.length === 0 || wanted.some((part) => name.includes(part)));
  const viewers = [...new Set(pages.flatMap((page) => page.viewers))];
  const shots: Shot[] = [];
  for (const viewer of viewers) {
    const context = await browser.newContext({ baseURL: application.baseUrl.origin });
    if (viewer !== 'visitor') await signIn(await context.newPage(), viewer);
    const mine = pages.filter((page) => page.viewers.includes(viewer));
    shots.push(...(await takeShots(context, viewer, mine)));
    await context.close();
  }
  writeFileSync(join(folder, 'index.html'), writeIndex(shots));
  process.stdout.write(`${shots.length} pictures; open ${join('.shots', 'index.html')}\n`);
}

let exitCode = 1;
try {
  const application = await startDemoWorks(life);
  rmSync(folder, { recursive: true, force: true });
  mkdirSync(folder);
  const browser = await chromium.launch(chromiumAt);
  life.onStop(() => browser.close());
  await takeAll(browser, application, process.argv.slice(2));
  exitCode = 0;
} catch (error) {
  if (!life.signal.aborted) sayFailure(error);
}
await life.end(exitCode);
