import { and, asc, eq } from 'drizzle-orm';
import type { Page } from 'playwright/test';
import { paths } from '~/lib/paths';
import { readings, testRuns, units } from '~/server/db/schema';
import { expect, test } from './fixtures';
import { waitForIslands } from './people';

test('a dead network, a second window and another tester lose nothing on the station', async ({
  login,
  database,
  expectedFaults,
}) => {
  test.setTimeout(120_000);
  // The dead network, and the second window's entry that is not taken.
  expectedFaults.push(/ERR_INTERNET_DISCONNECTED/, /409 \(Conflict\)/);
  const page = await login('tester');
  const [unit] = await database
    .select({ id: units.id, serial: units.serial })
    .from(units)
    .innerJoin(testRuns, and(eq(testRuns.unitId, units.id), eq(testRuns.state, 'open')))
    .orderBy(asc(testRuns.id));
  if (unit === undefined) throw new Error('The demo works has no unit in its final test.');
  const [run] = await database
    .select({ id: testRuns.id, runNo: testRuns.runNo })
    .from(testRuns)
    .where(and(eq(testRuns.unitId, unit.id), eq(testRuns.state, 'open')));
  if (run === undefined) throw new Error('Its run is gone.');
  const address = paths.run(unit.serial, run.runNo);
  const stored = async () => {
    const rows = await database.select().from(readings).where(eq(readings.testRunId, run.id));
    return rows.filter(({ voidedAt }) => voidedAt === null).map(({ enteredText }) => enteredText);
  };
  const open = async (on: Page) => {
    await on.goto(address);
    await waitForIslands(on);
    await expect(on.getByRole('heading', { name: 'Final test' })).toBeVisible();
  };
  const current = (on: Page) => on.getByLabel('20 m, current, key down', { exact: true });
  const enter = async (on: Page, text: string) => {
    await current(on).fill(text);
    await current(on).press('Enter');
  };

  await open(page);
  // Another tester may have it: the demo works' runs are spread over them.
  const takeOver = page.getByRole('button', { name: 'Take over' });
  if (await takeOver.isVisible()) {
    await takeOver.click();
    await expect(takeOver).toHaveCount(0);
  }

  await test.step('before its script runs the grid takes no keys, because nobody would hear them', async () => {
    const still = await login('tester', { javaScriptEnabled: false });
    await still.goto(address);
    await expect(current(still)).not.toBeEditable();
    await expect(current(page)).toBeEditable();
  });

  await test.step('what is typed while the network is dead stays, over a reload, and arrives', async () => {
    const door = `**${paths.api.readings(run.id)}`;
    await page.route(door, (route) => route.abort('internetdisconnected'));
    await enter(page, '811 mA');
    await expect(page.getByText('Not saved yet', { exact: true })).toBeVisible();
    expect(await stored()).not.toContain('811 mA');
    page.once('dialog', (dialog) => void dialog.accept());
    await page.reload();
    await waitForIslands(page);
    await expect(current(page)).toHaveValue(/811/);
    await expect(page.getByText('Not saved yet', { exact: true })).toBeVisible();
    expect(await stored()).not.toContain('811 mA');
    await page.unroute(door);
    await expect.poll(stored, { timeout: 20_000 }).toContain('811 mA');
    await expect(page.getByText('Not saved yet', { exact: true })).toHaveCount(0);
  });

  const second = await login('tester');
  await test.step('of two windows on one run, the later is told, and its value is not taken', async () => {
    await open(second);
    await enter(page, '812 mA');
    await expect.poll(stored).toContain('812 mA');
    await enter(second, '813 mA');
    await current(second).focus();
    await expect(second.getByRole('alert')).toContainText('Another window has entered “812 mA”');
    expect(await stored()).toContain('812 mA');
    expect(await stored()).not.toContain('813 mA');
    await current(second).press('Escape');
    await expect(current(second)).toHaveValue(/812/);
  });

  const owner = await login('owner');
  await test.step('another tester takes the run over in the open, and the first is told', async () => {
    await open(owner);
    await expect(owner.getByText('Ines Aldous has this run')).toBeVisible();
    await expect(current(owner)).not.toBeEditable();
    await owner.getByRole('button', { name: 'Take over' }).click();
    await expect(current(owner)).toBeEditable();
    await enter(page, '814 mA');
    await expect(page.getByText('Maren Tolley has this run')).toBeVisible();
    await expect(current(page)).not.toBeEditable();
    expect(await stored()).not.toContain('814 mA');
    // Given back, so that whoever looks at this run next finds it as it was.
    await page.getByRole('button', { name: 'Take over' }).click();
    await expect(current(page)).toBeEditable();
  });
});
