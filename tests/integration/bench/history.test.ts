import { beforeEach, describe, expect, it } from 'vitest';
import { POST as keep } from '~/pages/api/history';
import { POST as paste } from '~/pages/api/history-pastes';
import type { SignedIn } from '~/server/auth/sessions';
import { historyReadings, historySheets, runPoints, testRuns } from '~/server/db/schema';
import { listHistorySheets, listHistoryValues, readHistoryPaste } from '~/server/queries/bench/read-history';
import { seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { browser, callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let tester: SignedIn;

beforeEach(async () => {
  bench = await seedBench(database.db);
  tester = {
    id: bench.tester,
    name: 'Ines',
    email: 'ines@thistledown.example',
    callSign: null,
    roles: ['tester'],
  };
});

const model = 'holm-3';
const text = [
  'Serial\tDate\t20 m power [W]\t20 m 2nd\tKey down',
  'H3-0147\t2019-03-09\t4,8\t-51\t812 mA',
  'H3-0002\t2019-03-10\t5.0\t=1+1\t0,8 A',
  'H3-0003\tspring\t5.0\t-50\t800 mA',
].join('\n');

async function pasted(table = text): Promise<number> {
  const { response } = await callDoor(paste, { ...sendJson({ model, text: table }), person: tester });
  expect(response.status).toBe(200);
  return ((await response.json()) as { fileId: number }).fileId;
}

async function kept(body: Record<string, unknown>, person = tester) {
  const { response } = await callDoor(keep, {
    ...sendJson({ model, duplicates: 'ask', meaning: [], band: [], unit: [], ...body }),
    person,
  });
  return response;
}

describe('a pasted table of old sheets', () => {
  it('is kept as history, and never as a run', async () => {
    const response = await kept({ fileId: await pasted(), note: 'paper sheets' });
    expect(await response.json()).toEqual({ sheets: 2, readings: 5, skipped: 0, refused: 2 });
    const sheets = await database.db.select().from(historySheets);
    expect(sheets.map(({ serial, testedOn, unitId }) => [serial, testedOn, unitId !== null])).toEqual([
      ['H3-0147', '2019-03-09', true],
      ['H3-0002', '2019-03-10', false],
    ]);
    expect(await database.db.$count(testRuns)).toBe(0);
    expect(await database.db.$count(runPoints)).toBe(0);
    const [shown] = await listHistorySheets(database.db, { serial: 'H3-0147', limit: 10 });
    expect(shown).toMatchObject({
      note: 'paper sheets',
      readings: [
        { label: '20 m, power', value: '4.80 W', entered: '4,8 (W)' },
        { label: '20 m, 2nd harmonic', value: '−51.0 dBc' },
        { label: 'Current, key down', value: '812 mA' },
      ],
    });
    const values = await listHistoryValues(database.db, bench.modelId);
    expect(values).toHaveLength(5);
    const point = { quantityKey: 'rf_power', band: '20m' };
    expect(values.filter(({ quantityKey }) => quantityKey === 'rf_power')).toEqual([
      { ...point, serial: 'H3-0002', testedOn: '2019-03-10', value: 5 },
      { ...point, serial: 'H3-0147', testedOn: '2019-03-09', value: 4.8 },
    ]);
    expect(await listHistoryValues(database.db, bench.modelId + 1000)).toEqual([]);
  });

  it('follows the columns as they were corrected', async () => {
    const fileId = await pasted();
    const columns = {
      meaning: ['serial', 'date', 'rf_power', '', ''],
      band: ['', '', '40m', '', ''],
      unit: ['', '', 'dBm', '', ''],
    };
    expect(await (await kept({ fileId, ...columns })).json()).toMatchObject({ sheets: 2, readings: 2 });
    const [reading] = await database.db.select().from(historyReadings);
    expect(reading).toMatchObject({ band: '40m', enteredUnit: 'dBm' });
  });

  it('asks about sheets that are here already, of the same serial number and day', async () => {
    const fileId = await pasted();
    await kept({ fileId });
    const asked = await kept({ fileId });
    expect(asked.status).toBe(409);
    const problem = await problemIn(asked);
    expect(problem['detail']).toMatch(/H3-0147 of 9 March 2019, H3-0002 of 10 March 2019\. Say what becomes/);
    expect(problem['fields']).toHaveProperty('duplicates');
    expect(await (await kept({ fileId, duplicates: 'skip' })).json()).toMatchObject({
      sheets: 0,
      skipped: 2,
    });
    expect(await (await kept({ fileId, duplicates: 'keep' })).json()).toMatchObject({
      sheets: 2,
      skipped: 0,
    });
    expect(await database.db.$count(historySheets)).toBe(4);
  });

  it('asks about a sheet that stands twice in one table', async () => {
    const twice = `${text}\nH3-0147\t2019-03-09\t4.9\t-50\t810 mA`;
    expect((await kept({ fileId: await pasted(twice) })).status).toBe(409);
    expect(await database.db.$count(historySheets)).toBe(0);
  });

  it('takes as many rows as it says, and no more', async () => {
    const rows = (count: number) =>
      ['Serial,Power [W]', ...Array.from({ length: count }, (_, n) => `H3-${String(n + 1)},4.5`)].join('\n');
    const response = await kept({ fileId: await pasted(rows(1200)) });
    expect(await response.json()).toMatchObject({ sheets: 1200, refused: 0 });
    const { response: refused } = await callDoor(paste, {
      ...sendJson({ model, text: rows(5001) }),
      person: tester,
    });
    expect(refused.status).toBe(422);
    expect((await problemIn(refused))['fields']).toHaveProperty('text');
  });

  it.each([
    [{ model: '', text }, 'model'],
    [{ model, text: '' }, 'text'],
    [{ model, text: 'Serial\tPower' }, 'text'],
  ])('is refused beside its field', async (body, field) => {
    const { response } = await callDoor(paste, { ...sendJson(body), person: tester });
    expect(response.status).toBeGreaterThanOrEqual(400);
    expect((await problemIn(response))['fields']).toHaveProperty(field);
  });

  it('is a tester’s to keep, and another file is no table', async () => {
    const fileId = await pasted();
    expect((await kept({ fileId }, { ...tester, roles: ['builder'] })).status).toBe(403);
    expect((await kept({ fileId: fileId + 1 })).status).toBe(404);
    await expect(readHistoryPaste(database.db, fileId + 1, null)).rejects.toMatchObject({
      code: 'not_found',
    });
  });

  it('goes on to its reading where it was sent by a plain form', async () => {
    const { response } = await callDoor(paste, {
      ...{ body: new URLSearchParams({ model, text }), headers: browser, person: tester },
    });
    expect(response.headers.get('location')).toMatch(/^\/works\/history\?file=\d+&model=holm-3$/);
  });
});
