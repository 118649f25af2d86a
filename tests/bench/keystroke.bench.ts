import { eq } from 'drizzle-orm';
import { chromium } from 'playwright';
import { paths } from '~/lib/paths';
import { openDatabase, type Db } from '~/server/db/client';
import { models, testPlanRevisions, testPoints, units, userProfiles } from '~/server/db/schema';
import { demoSignIns } from '~/server/run/demo/people';
import { createInstrument } from '~/server/services/bench/create-instrument';
import { createPath } from '~/server/services/bench/create-path';
import { openRun } from '~/server/services/bench/open-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { signIn, waitForIslands } from '../e2e/people';
import { buildCalibration, buildInstrumentSpec, buildPathSpec, callAs } from '../factories/bench';
import { chromiumAt } from '../setup/chromium';
import { figure } from '../setup/figures';

const bands = { '80m': 3.53, '40m': 7.03, '30m': 10.116, '20m': 14.06, '17m': 18.086, '15m': 21.06 };

/** Twelve quantities a band, with what is read on each; the two without a text follow from the others. */
const columns = [
  { quantityKey: 'rf_power', lowerLimit: 2, text: '-13 dBm' },
  { quantityKey: 'harmonic_2', limitRule: 'spurious', decision: 'guarded', text: '58.4' },
  { quantityKey: 'harmonic_3', limitRule: 'spurious', decision: 'guarded', text: '63.1' },
  { quantityKey: 'current_rest', upperLimit: 0.1, text: '62 mA' },
  { quantityKey: 'current_key_down', upperLimit: 0.9, text: '802 mA' },
  { quantityKey: 'current_no_drive', upperLimit: 0.3, text: '210 mA' },
  { quantityKey: 'supply_voltage', lowerLimit: 13, upperLimit: 14, text: '13.8 V' },
  { quantityKey: 'efficiency', lowerLimit: 0.2, text: null },
  { quantityKey: 'dissipation', upperLimit: 12, text: null },
  { quantityKey: 'keying_rise', lowerLimit: 0.003, upperLimit: 0.008, text: '5 ms' },
  { quantityKey: 'keying_fall', lowerLimit: 0.003, upperLimit: 0.008, text: '5.5 ms' },
  { quantityKey: 'case_temperature', upperLimit: 333, text: '41 °C' },
] as const;

/** A unit of a model with 72 points, its run open and every cell that is read filled; the page of its station. */
async function seedFullRun(db: Db, email: string): Promise<string> {
  const [tester] = await db
    .select({ id: userProfiles.userId })
    .from(userProfiles)
    .where(eq(userProfiles.email, email));
  if (tester === undefined) throw new Error(`Nobody has the address ${email}.`);
  const createdAt = new Date();
  const ctx = callAs(db, tester.id, createdAt);
  const [{ insertId: modelId }] = await db.insert(models).values({
    ...{ slug: 'six-bands', serialPrefix: 'SIX', name: 'Six bands', tagline: 'Six bands.', panel: {} },
    ...{ description: 'Six bands.', ratedPowerW: 5, netWeightG: 400, hsCode: '851762', createdAt },
    ...{ customsDescription: 'Radio transceiver', state: 'for_sale' },
  });
  const [{ insertId: testPlanRevisionId }] = await db
    .insert(testPlanRevisions)
    .values({ modelId, letter: 'A', state: 'draft', supplyV: 13.8, loadOhm: 50, createdAt });
  const points = Object.entries(bands).flatMap(([band, mhz]) =>
    columns.map(({ text: _text, ...column }) => ({
      ...{ limitRule: 'fixed' as const, decision: 'simple' as const, required: true },
      ...column,
      ...{ band, freqHz: Math.round(mhz * 1e6), testPlanRevisionId },
    })),
  );
  await db.insert(testPoints).values(points.map((point, index) => ({ ...point, position: index + 1 })));
  const serial = 'SIX-0001';
  await db.insert(units).values({
    ...{ serial, modelId, testPlanRevisionId, createdAt, pageCode: 'PAGESIX0001' },
    ...{ stage: 'final_test', options: [], alignment: {} },
  });
  const spec = buildInstrumentSpec({
    calibration: buildCalibration({ calibratedOn: null, dueOn: '2099-12-31' }),
  });
  const fair = { accuracy: [{ halfWidth: 1, unit: 'percent' as const }], resolution: null };
  const read: [string, typeof fair][] = columns
    .filter(({ text }) => text !== null)
    .map(({ quantityKey }) => [quantityKey, fair]);
  const { instrumentRevisionId } = await createInstrument(
    {
      ...{ number: 'SIX-1', name: 'Everything in one' },
      spec: { ...spec, quantities: { ...Object.fromEntries(read), ...spec.quantities } },
    },
    ctx,
  );
  const { pathRevisionId } = await createPath({ number: 'SIX-P', name: '40 dB', spec: buildPathSpec() }, ctx);
  const { runId, runNo } = await openRun({ serial }, ctx);
  const stored = await db
    .select()
    .from(testPoints)
    .where(eq(testPoints.testPlanRevisionId, testPlanRevisionId));
  for (const { id, quantityKey } of stored) {
    const text = columns.find((each) => each.quantityKey === quantityKey)?.text ?? null;
    if (text === null) continue;
    const entry = { runId, testPointId: id, text, again: false, attenuationHeld: false, version: 0 };
    await recordReading({ ...entry, instrumentRevisionId, pathRevisionId, confirmed: true }, ctx);
  }
  return paths.run(serial, runNo);
}

/**
 * From the event of the key as the browser stamps it, to the frame in which the cell shows the verdict that
 * follows from what then stands in it: the page's own clock, on a grid of 6 bands and 12 quantities that is full.
 * The keys by turns make a power pass (`-3` dBm at the meter) and take that back.
 */
figure({
  name: 'keystroke',
  goal: 50,
  run: async ({ demo, onStop }) => {
    const { baseUrl, variables } = await demo();
    const tester = demoSignIns.find(({ role }) => role === 'tester');
    if (tester === undefined) throw new Error('The demo works has no tester.');
    const database = openDatabase(variables['DATABASE_URL'] ?? '', 2);
    onStop(() => database.close());
    const address = await seedFullRun(database, tester.email);

    const browser = await chromium.launch(chromiumAt);
    onStop(() => browser.close());
    const page = await browser.newPage({ baseURL: baseUrl.origin, viewport: { width: 1440, height: 900 } });
    // The loader of this file names functions by a helper, which the page has to know too.
    await page.addInitScript('globalThis.__name = (named) => named');
    await signIn(page, 'tester');
    await page.goto(address);
    await waitForIslands(page);
    const cell = page.getByLabel('20 m, power', { exact: true });
    const mark = page.locator('label', { has: cell }).locator('[data-verdict]');

    const values: number[] = [];
    await cell.fill('-');
    for (let turn = 0; turn < 14; turn += 1) {
      const { key, verdict } =
        turn % 2 === 0 ? { key: '3', verdict: 'pass' } : { key: 'Backspace', verdict: 'fail' };
      const wait = await cell.evaluateHandle((input, wanted) => {
        const label = input.closest('label');
        const shown = () => label?.querySelector('[data-verdict]')?.getAttribute('data-verdict');
        if (shown() === wanted) throw new Error(`It says ${wanted} before the key.`);
        return {
          done: new Promise<number>((resolve) => {
            window.addEventListener(
              'keydown',
              ({ timeStamp }) => {
                const look = () => {
                  if (shown() !== wanted) return void requestAnimationFrame(look);
                  // What is posted from a frame comes after that frame is painted.
                  const { port1, port2 } = new MessageChannel();
                  port1.onmessage = () => resolve(performance.now() - timeStamp);
                  port2.postMessage(null);
                };
                requestAnimationFrame(look);
              },
              { capture: true, once: true },
            );
          }),
        };
      }, verdict);
      await page.keyboard.press(key);
      await mark.and(page.locator(`[data-verdict="${verdict}"]`)).waitFor();
      values.push(await wait.evaluate(({ done }) => done));
    }
    // The first of each are still being compiled.
    return { values: values.slice(4), floors: null };
  },
});
