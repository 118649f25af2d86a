import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright/test';
import { expect, setting, test } from './fixtures';
import { listExamplePages, type ExamplePage } from './page-list';
import { askForLink, waitForIslands, type Viewer } from './people';

const viewers: Viewer[] = ['visitor', 'buyer', 'owner', 'builder', 'tester', 'shipper', 'bookkeeper'];
const wide = { width: 1440, height: 900 };

// They only look, so they need not wait for one another.
test.describe.configure({ mode: 'parallel' });

let pages: ExamplePage[] = [];
test.beforeAll(async ({ database }) => {
  await askForLink(setting('RIGWRIGHT_E2E_URL'));
  pages = await listExamplePages(database, setting('RIGWRIGHT_SECRET'));
});

/** Findings of axe that keep somebody out, in words. */
async function findSerious(page: Page, rules?: string[]): Promise<string[]> {
  const axe = new AxeBuilder({ page }).setLegacyMode(true);
  const { violations } = await (rules === undefined ? axe : axe.withRules(rules)).analyze();
  return violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(
      ({ id, help, nodes }) => `${id}: ${help}: ${nodes.map(({ target }) => target.join(' ')).join(' | ')}`,
    );
}

/** By how many pixels the page is wider than its window. */
function overflowOf(page: Page): Promise<number> {
  return page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
}

for (const viewer of viewers) {
  // A person sees parts of a page that another does not, so each looks at all that they may see.
  test(`every page for the ${viewer}: can be used by everybody, fits, and breaks nothing`, async ({
    login,
  }) => {
    test.setTimeout(800_000);
    const page = await login(viewer, { viewport: wide, colorScheme: 'light', reducedMotion: 'reduce' });
    const mine = pages.filter((each) => each.viewers.includes(viewer) && each.status !== 500);
    expect(mine.length).toBeGreaterThan(0);
    const isFirst = (each: ExamplePage) => each.viewers[0] === viewer;
    for (const each of mine) {
      await test.step(each.path, async () => {
        const answer = await page.goto(each.path);
        await waitForIslands(page);
        expect.soft(answer?.status(), `${each.path} answers`).toBe(each.status);
        expect.soft(await findSerious(page), `${each.path}, light`).toEqual([]);
        expect.soft(await overflowOf(page), `${each.path} at ${wide.width} px`).toBeLessThanOrEqual(0);
        // Colours are the theme's, and widths the layout's: the person who sees the most stands for all.
        if (!isFirst(each)) return;
        await page.emulateMedia({ colorScheme: 'dark' });
        expect.soft(await findSerious(page, ['color-contrast']), `${each.path}, dark`).toEqual([]);
        await page.emulateMedia({ colorScheme: 'light' });
        await page.setViewportSize({ width: each.narrow, height: 1000 });
        expect.soft(await overflowOf(page), `${each.path} at ${each.narrow} px`).toBeLessThanOrEqual(0);
        await page.setViewportSize(wide);
      });
    }
  });
}
