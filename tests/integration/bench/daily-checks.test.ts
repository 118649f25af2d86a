import { asc, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import { letIn } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { checkReferences, dailyChecks, instruments, paths, runFlags, testRuns } from '~/server/db/schema';
import { listFlagsOfRun, listOpenFlags } from '~/server/queries/bench/list-flags';
import { readCheckState } from '~/server/queries/bench/read-check-state';
import { listReminders } from '~/server/queries/office/list-reminders';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { recordDailyCheck } from '~/server/services/bench/record-daily-check';
import { recordReading } from '~/server/services/bench/record-reading';
import { setConditions } from '~/server/services/bench/set-conditions';
import { POST as retireDoor } from '~/pages/api/check-references/[id]/retirement';
import { POST as defineDoor } from '~/pages/api/check-references/index';
import { POST as explainDoor } from '~/pages/api/daily-checks/[id]/explanation';
import { POST as checkDoor } from '~/pages/api/daily-checks/index';
import { POST as retireInstrumentDoor } from '~/pages/api/instruments/[id]/retirement';
import { POST as retirePathDoor } from '~/pages/api/paths/[id]/retirement';
import { POST as endFlagDoor } from '~/pages/api/run-flags/[id]/ending';
import { callAs, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let tester: SignedIn;
let owner: SignedIn;
let runId: number;

/** A moment of 9 March 2027, or of another day of that month. */
const at = (hour: number, day = 9) => new Date(Date.UTC(2027, 2, day, hour));

beforeEach(async () => {
  bench = await seedBench(database.db);
  tester = await signedIn(bench.tester);
  owner = await signedIn(bench.owner);
  ({ runId } = await openRun({ serial: bench.serial }, callAs(database.db, bench.tester, at(8))));
});

async function signedIn(id: number): Promise<SignedIn> {
  const found = await letIn(id);
  if (found === null) throw new Error('The person is shut out.');
  return found;
}

async function equipment() {
  const [instrument] = await database.db.select().from(instruments).orderBy(asc(instruments.id));
  const [path] = await database.db.select().from(paths).orderBy(asc(paths.id));
  return { instrumentId: instrument?.id ?? 0, pathId: path?.id ?? 0 };
}

async function define(change: Record<string, unknown> = {}, person: SignedIn | null = tester) {
  const { response } = await callDoor(defineDoor, {
    person,
    now: at(7),
    ...sendJson({
      ...{ number: 'r-1', name: 'Kept rig', quantityKey: 'rf_power', freqMHz: '14.06' },
      ...{ nominal: '5 W', tolerance: '0.2 dB', ...(await equipment()) },
      ...change,
    }),
  });
  return response;
}

async function referenceId(): Promise<number> {
  const [row] = await database.db.select().from(checkReferences);
  return row?.id ?? 0;
}

/** 5 W through the 40.2 dB of the path are −3.21 dBm. */
const good = '-3.21 dBm';
const bad = '-4.0 dBm';

async function check(text: string, now: Date, change: Record<string, unknown> = {}, person = tester) {
  const { response } = await callDoor(checkDoor, {
    person,
    now,
    ...sendJson({ checkReferenceId: await referenceId(), text, ...change }),
  });
  return response;
}

async function readAll(): Promise<void> {
  const ctx = callAs(database.db, bench.tester, at(9));
  await setConditions({ runId, supplyV: 13.8, ambientC: 20, firmwareVersion: '1.0', alignment: {} }, ctx);
  const texts = {
    ...{ rf_power: '-6.03 dBm', harmonic_2: '51.1', harmonic_3: '61.6' },
    ...{ current_key_down: '612 mA', frequency_error: '38' },
  };
  for (const [quantity, text] of Object.entries(texts)) {
    await recordReading(
      {
        ...{ runId, testPointId: bench.pointId(quantity), text },
        ...{ again: false, confirmed: false, attenuationHeld: false },
        instrumentRevisionId: bench.instrumentRevisionId,
        pathRevisionId: bench.pathRevisionId,
      },
      ctx,
    );
  }
}

const close = (now: Date) => closeRun({ runId }, callAs(database.db, bench.tester, now));

describe('a reference', () => {
  test('is kept with its band in the units inside', async () => {
    expect((await define()).status).toBe(200);
    const [row] = await database.db.select().from(checkReferences);
    expect(row).toMatchObject({
      number: 'R-1',
      freqHz: 14.06e6,
      nominal: 5,
      tolerance: 0.2,
      retiredAt: null,
    });
  });

  test('of a current takes its tolerance in percent', async () => {
    await define({
      quantityKey: 'current_key_down',
      freqMHz: '',
      nominal: '600 mA',
      tolerance: '1 %',
      pathId: '',
    });
    const [row] = await database.db.select().from(checkReferences);
    expect(row).toMatchObject({ nominal: 0.6, pathId: null });
    expect(row?.tolerance).toBeCloseTo(0.006, 12);
  });

  test.each([
    [{ number: '' }, 'number', /letters, digits/],
    [{ name: '' }, 'name', /Say what it is/],
    [{ quantityKey: 'efficiency' }, 'quantityKey', /an instrument reads/],
    [{ freqMHz: '' }, 'freqMHz', /State the frequency/],
    [{ freqMHz: '-1' }, 'freqMHz', /above 0/],
    [{ nominal: '5' }, 'nominal', /Which unit/],
    [{ nominal: '0 W' }, 'nominal', /No power at all/],
    [{ tolerance: '0.2' }, 'tolerance', /Say the unit/],
    [{ tolerance: '3 %' }, 'tolerance', /in dB/],
    [{ tolerance: '0 dB' }, 'tolerance', /more than 0/],
    [{ instrumentId: '999' }, 'instrumentId', /in use/],
    [{ pathId: '999' }, 'pathId', /in use/],
    [{ freqMHz: '500' }, 'pathId', /not at 500 MHz/],
    [{ quantityKey: 'current_key_down', nominal: '1 A', tolerance: '1 %' }, 'pathId', /does nothing/],
  ])('is refused beside its field: %j', async (change, field, sentence) => {
    const problem = await problemIn(await define(change));
    expect((problem['fields'] as Record<string, string>)[field]).toMatch(sentence);
    expect(await database.db.select().from(checkReferences)).toEqual([]);
  });

  test('is for testers and the owner, and its number is its own', async () => {
    const builder = await signedIn(await seedPerson(database.db, { name: 'Odo', roles: ['builder'] }));
    expect((await define({}, builder)).status).toBe(403);
    expect((await define({}, null)).status).toBe(401);
    expect((await define({}, owner)).status).toBe(200);
    expect((await define()).status).toBe(409);
  });

  test('keeps its instrument and its path in use, until it is given up', async () => {
    await define();
    const { instrumentId, pathId } = await equipment();
    const ask = (door: typeof retirePathDoor, id: number) =>
      callDoor(door, { person: tester, params: { id: String(id) } });
    expect(await problemIn((await ask(retireInstrumentDoor, instrumentId)).response)).toMatchObject({
      detail: 'SA-1 measures R-1 in the daily check. Give that reference up first.',
    });
    expect((await ask(retirePathDoor, pathId)).response.status).toBe(409);
    expect((await ask(retireDoor, await referenceId())).response.status).toBe(200);
    expect((await ask(retireDoor, await referenceId())).response.status).toBe(409);
    expect((await ask(retirePathDoor, pathId)).response.status).toBe(200);
    expect((await check(good, at(8))).status).toBe(409);
  });
});

describe('a check', () => {
  beforeEach(async () => {
    await define();
  });

  test('is corrected by the path and judged', async () => {
    expect(await (await check(good, at(8))).json()).toMatchObject({ isGood: true, flagged: 0 });
    const [row] = await database.db.select().from(dailyChecks);
    expect(row?.value).toBeCloseTo(5, 2);
    expect(row?.deviation).toBeCloseTo(0, 2);
    expect(await (await check('-3.5', at(9))).json()).toMatchObject({ isGood: false, deviation: '−0.29 dB' });
  });

  test.each([
    ['', /Type what the instrument shows/],
    ['loud', /does not begin with a number/],
    ['-3.2', /Which unit/],
    ['3 dBc', /does not fit/],
    ['3.21 dBm', /off by \+6\.42 dB, more than ten times its band/],
  ])('is refused beside its field: %j', async (text, sentence) => {
    const problem = await problemIn(await check(text, at(8)));
    expect((problem['fields'] as Record<string, string>)['text']).toMatch(sentence);
    expect(await database.db.select().from(dailyChecks)).toEqual([]);
  });

  test('that was asked about is taken once it is said to be meant', async () => {
    expect(await (await check('3.21 dBm', at(8), { confirmed: 'on' })).json()).toMatchObject({
      isGood: false,
    });
  });

  test('is missing on the next day, in the zone of the works', async () => {
    await check(good, at(8));
    expect((await readCheckState(database.db, at(20))).missingToday).toEqual([]);
    expect((await readCheckState(database.db, at(1, 10))).missingToday).toMatchObject([{ number: 'R-1' }]);
  });
});

describe('rule: no run is closed while a reference is bad and nobody has said why', () => {
  beforeEach(readAll);

  test('a works without a reference is never asked, and a missing check stops nothing', async () => {
    expect(await readCheckState(database.db, at(10))).toEqual({ missingToday: [], bad: [] });
    await define();
    expect((await readCheckState(database.db, at(10))).missingToday).toHaveLength(1);
    expect((await close(at(10))).result).toBe('passed');
  });

  test('a bad check names its reference, an explanation lets runs be closed again', async () => {
    await define();
    await check(bad, at(9));
    await expect(close(at(10))).rejects.toThrow(/R-1 \(Kept rig, off by −0\.79 dB\) is outside its band/);
    const [row] = await database.db.select().from(dailyChecks);
    const explain = (explanation: string, person = tester) =>
      callDoor(explainDoor, { person, params: { id: String(row?.id) }, ...sendJson({ explanation }) });
    expect((await problemIn((await explain(' ')).response))['fields']).toHaveProperty('explanation');
    const builder = await signedIn(await seedPerson(database.db, { name: 'Odo', roles: ['builder'] }));
    expect((await explain('A loose connector.', builder)).response.status).toBe(403);
    expect((await explain('A loose connector at the load; tightened.')).response.status).toBe(200);
    expect((await explain('Again.')).response.status).toBe(409);
    expect((await close(at(11))).result).toBe('passed');
  });

  test('a good check after it lets runs be closed, and is nothing to explain', async () => {
    await define();
    await check(bad, at(9));
    await check(good, at(10));
    const [, second] = await database.db.select().from(dailyChecks).orderBy(asc(dailyChecks.id));
    const { response } = await callDoor(explainDoor, {
      person: tester,
      params: { id: String(second?.id) },
      ...sendJson({ explanation: 'Why?' }),
    });
    expect(await problemIn(response)).toMatchObject({ status: 409 });
    expect((await close(at(11))).result).toBe('passed');
  });

  test('a bad check and a closing at the same moment: the run is refused or flagged', async () => {
    await define();
    const entry = { checkReferenceId: await referenceId(), text: bad, confirmed: false };
    const [, closed] = await Promise.allSettled([
      recordDailyCheck(entry, callAs(database.db, bench.tester, at(11))),
      close(at(11)),
    ]);
    const [run] = await database.db.select().from(testRuns).where(eq(testRuns.id, runId));
    const flags = await database.db.select().from(runFlags);
    expect([run?.state, flags.length]).toEqual(closed.status === 'fulfilled' ? ['closed', 1] : ['open', 0]);
  });
});

describe('rule: a bad check flags every run closed since the last good one', () => {
  beforeEach(async () => {
    await define();
    await readAll();
  });

  test('that used the instrument; the owner is told and ends the flag with a note', async () => {
    await check(good, at(8));
    await close(at(10));
    expect(await (await check(bad, at(11))).json()).toMatchObject({ isGood: false, flagged: 1 });
    const [flag] = await listOpenFlags(database.db);
    expect(flag).toMatchObject({ serial: bench.serial, runNo: 1, number: 'R-1', deviation: '−0.79 dB' });
    const reminders = async (roles: ('owner' | 'tester')[]) =>
      (await listReminders(database.db, roles, { now: at(12), timeZone: 'Europe/Dublin' })).map(
        ({ what }) => what,
      );
    expect(await reminders(['owner'])).toEqual([
      'Explain the check of R-1',
      `Look at run 1 of ${bench.serial}`,
    ]);
    expect(await reminders(['tester'])).toEqual(['Explain the check of R-1']);

    const end = (note: string, person: SignedIn) =>
      callDoor(endFlagDoor, { person, params: { id: String(flag?.id) }, ...sendJson({ note }) });
    expect((await end('Fine.', tester)).response.status).toBe(403);
    expect((await problemIn((await end('', owner)).response))['fields']).toHaveProperty('note');
    expect((await end('Measured again on another meter: 2.6 W.', owner)).response.status).toBe(200);
    expect((await end('Twice.', owner)).response.status).toBe(409);
    expect(await listOpenFlags(database.db)).toEqual([]);
    expect(await listFlagsOfRun(database.db, runId)).toMatchObject([
      { endedBy: 'Mara Quill', note: 'Measured again on another meter: 2.6 W.' },
    ]);
  });

  test('once, however often it is measured, and not again after a good one', async () => {
    await close(at(10));
    await check(bad, at(11));
    expect(await (await check(bad, at(12))).json()).toMatchObject({ flagged: 0 });
    await check(good, at(13));
    expect(await (await check(bad, at(14))).json()).toMatchObject({ flagged: 0 });
    expect(await database.db.select().from(runFlags)).toHaveLength(1);
  });

  test('and no run that was closed before it', async () => {
    await close(at(10));
    await check(good, at(11));
    expect(await (await check(bad, at(12))).json()).toMatchObject({ flagged: 0 });
  });
});
