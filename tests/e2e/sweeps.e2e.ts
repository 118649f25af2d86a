import { asc, eq } from 'drizzle-orm';
import { paths } from '~/lib/paths';
import { readings, testRuns, units } from '~/server/db/schema';
import { expect, test } from './fixtures';
import { waitForIslands } from './people';

/** A sweep of a carrier with its second and third harmonic, as a browser takes it. */
function sweepFile(name: string, carrierHz: number, preamble = 'RBW,30,kHz\nDetector,Positive peak\n') {
  const stepHz = 20e3;
  const lines = new Map(
    [-5.3, -58.4, -66.9].map((level, index) => [Math.round(((index + 1) * carrierHz) / stepHz), level]),
  );
  const rows = Array.from(
    { length: 4001 },
    (_, index) => `${index * stepHz},${lines.get(index) ?? -92 + (index % 4) / 2}`,
  );
  return {
    name,
    mimeType: 'text/csv',
    buffer: Buffer.from(`${preamble}Frequency (Hz),Level (dBm)\n${rows.join('\n')}\n`),
  };
}

test('sweeps are looked at, answered about and accepted on the station, one a band', async ({
  login,
  database,
}) => {
  const [run] = await database
    .select({ id: testRuns.id, runNo: testRuns.runNo, serial: units.serial })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .where(eq(testRuns.state, 'open'))
    .orderBy(asc(testRuns.id));
  if (run === undefined) throw new Error('The demo works has no open run.');
  const ofSweeps = async () =>
    (await database.select().from(readings).where(eq(readings.testRunId, run.id))).filter(
      ({ source }) => source === 'sweep',
    );

  const page = await login('tester', { viewport: { width: 1280, height: 900 } });
  await page.goto(paths.run(run.serial, run.runNo));
  await waitForIslands(page);
  const panel = page.getByRole('region', { name: 'Sweep', exact: true });
  await page
    .getByLabel('Sweep files')
    .setInputFiles([
      sweepFile('asks.csv', 14.06e6, ''),
      sweepFile('forty.csv', 7.04e6),
      sweepFile('eighty.csv', 3.56e6),
    ]);
  const waiting = panel.getByRole('list', { name: 'Files that wait' });
  await expect(waiting.getByRole('button')).toHaveText([
    'asks.csv · 20 m, asks',
    'forty.csv · 40 m, ready',
    'eighty.csv · no band',
  ]);

  const look = panel.getByRole('region', { name: 'asks.csv: not kept yet' });
  await expect(look.getByRole('heading', { name: 'asks.csv: not kept yet' })).toBeFocused();
  await expect(look.getByText('2 questions are open.')).toBeVisible();
  const bandwidth = look.getByLabel('Resolution bandwidth');
  await expect(bandwidth).toHaveAccessibleDescription(/does not say its resolution bandwidth/);
  await bandwidth.fill('30');
  await bandwidth.press('Enter');
  await expect(look.getByText('One question is open.')).toBeVisible();
  await look.getByLabel('Detector').selectOption({ label: 'peak' });
  const accept = look.getByRole('button', { name: /^Accept/ });
  await expect(accept).toBeEnabled();
  expect(await ofSweeps()).toEqual([]);
  await expect(look.getByRole('row', { name: /20 m, 2nd harmonic/ })).toContainText('−53.1 dBc');
  await accept.click();

  await waiting.getByRole('button', { name: /eighty/ }).click();
  const stray = panel.getByRole('region', { name: 'eighty.csv: not kept yet' });
  await expect(stray.getByRole('alert')).toContainText('fits no band of this run');
  await expect(stray.getByRole('button', { name: /^Accept/ })).toHaveCount(0);
  await stray.getByRole('button', { name: 'Leave eighty.csv' }).click();
  await panel.getByRole('button', { name: /^Accept/ }).click();

  await expect(panel.getByRole('status')).toContainText(/forty\.csv: \d+ readings/);
  const kept = await ofSweeps();
  expect(new Set(kept.map(({ band }) => band))).toEqual(new Set(['20m', '40m']));
  expect(
    kept.find(({ band, quantityKey }) => band === '20m' && quantityKey === 'harmonic_2')?.value,
  ).toBeCloseTo(-53.1, 6);
  await panel.getByText('The sweep as a table').click();
  await expect(panel.getByRole('row', { name: /carrier/ })).toBeVisible();
});

test('a frequency plan is looked at and kept without scripts', async ({ login }) => {
  const page = await login('owner', { javaScriptEnabled: false });
  await page.goto(paths.frequencyPlan('voe-40'));
  await expect(page.getByRole('row', { name: /40 m 7 MHz to 7\.1 MHz/ })).toBeVisible();
  await page.getByLabel('From, MHz, row 3').fill('ten');
  await page.getByRole('button', { name: 'Look at it first' }).click();
  const wrong = page.getByLabel('From, MHz, row 3');
  await expect(wrong).toHaveAccessibleDescription('State the frequency in MHz, above 0.');
  await wrong.fill('10,7');
  await page.getByLabel('Symbol, row 3').first().fill('CLK');
  await page.getByRole('button', { name: 'Look at it first' }).click();
  await expect(page.getByText('Not kept yet')).toBeVisible();
  await page.getByRole('button', { name: 'Keep revision 2' }).click();
  await expect(page.getByText('Revision 2 of the frequency plan applies from now on.')).toBeVisible();
  await expect(page.getByLabel('Symbol, row 3').first()).toHaveValue('CLK');
});
