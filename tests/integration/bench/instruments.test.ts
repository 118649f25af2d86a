import { asc, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import { letIn } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { files, formReturns, instrumentRevisions, instruments, ledgerEntries } from '~/server/db/schema';
import { getInstrument, listEveryInstrument } from '~/server/queries/bench/read-instrument';
import { listInstruments } from '~/server/queries/bench/list-equipment';
import { createInstrument } from '~/server/services/bench/create-instrument';
import { reviseInstrument } from '~/server/services/bench/revise-instrument';
import { GET as fileDoor } from '~/pages/api/instruments/[id]/certificates/[revision]';
import { POST as reviseDoor } from '~/pages/api/instruments/[id]/revisions';
import { POST as retireDoor } from '~/pages/api/instruments/[id]/retirement';
import { POST as returnDoor } from '~/pages/api/instruments/[id]/return';
import { POST as createDoor } from '~/pages/api/instruments/index';
import { buildInstrumentSpec, callAs } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { browser, callDoor, problemIn } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let tester: SignedIn;

beforeEach(async () => {
  tester = await personOf('tester');
});

async function personOf(role: 'tester' | 'builder' | 'shipper'): Promise<SignedIn> {
  const found = await letIn(await seedPerson(database.db, { name: `Quill ${role}`, roles: [role] }));
  if (found === null) throw new Error('The person is shut out.');
  return found;
}

const pdf = (name = 'nm-4711.pdf', size = 64) =>
  new File([`%PDF-1.7\n${'x'.repeat(size)}`], name, { type: 'application/pdf' });

/** What the form holds when it is filled in for a multimeter. */
function filledIn(change: Record<string, string | File> = {}): FormData {
  const form = new FormData();
  const fields = {
    ...{ number: 'mm-7', name: 'Multimeter', grade: 'accredited', linearityDb: '', vswr: '', tapRatio: '' },
    ...{
      'accuracy.current_rest': '0,5 % + 0.2 mA',
      'resolution.current_rest': '0.1 mA',
      'accuracy.rf_power': '',
    },
    ...{ calibrationU: '0.05', calibrationUnit: 'percent', calibrationK: '2', calibratedOn: '2026-01-10' },
    ...{ dueOn: '2027-01-10', laboratory: 'Northmoor Metrology', certificateNumber: 'NM-4711' },
    ...change,
  };
  for (const [name, value] of Object.entries(fields)) form.set(name, value);
  return form;
}

async function enter(change: Record<string, string | File> = {}, person: SignedIn | null = tester) {
  return callDoor(createDoor, { person, body: filledIn(change) });
}

async function idOf(number: string): Promise<number> {
  const [row] = await database.db.select().from(instruments).where(eq(instruments.number, number));
  if (row === undefined) throw new Error(`There is no ${number}.`);
  return row.id;
}

const newestOf = async (number: string) => (await getInstrument(database.db, number))?.newest;

describe('an instrument by its form', () => {
  test('is kept with what the data sheet says, its calibration and the certificate as a file', async () => {
    const { response } = await enter({ certificateFile: pdf() });
    expect(response.status).toBe(200);
    const found = await newestOf('MM-7');
    expect(found?.fileName).toBe('nm-4711.pdf');
    expect(found?.spec).toMatchObject({
      grade: 'accredited',
      quantities: {
        current_rest: {
          accuracy: [
            { halfWidth: 0.5, unit: 'percent' },
            { halfWidth: 0.0002, unit: 'unit' },
          ],
          resolution: { halfWidth: 0.0001, unit: 'unit' },
        },
      },
      calibration: {
        expanded: 0.05,
        unit: 'percent',
        k: 2,
        dueOn: '2027-01-10',
        laboratory: 'Northmoor Metrology',
      },
    });
    expect(Object.keys(found?.spec.quantities ?? {})).toEqual(['current_rest']);
  });

  test('goes on to its own page, which says so', async () => {
    const { response } = await callDoor(createDoor, { person: tester, body: filledIn(), headers: browser });
    expect([response.status, response.headers.get('location')]).toEqual([303, '/works/instruments/MM-7']);
  });

  test.each([
    ['number', { number: 'MM 7' }, 'number', /letters, digits/],
    ['name', { name: ' ' }, 'name', /Say what it is/],
    ['grade', { grade: 'gold' }, 'grade', /Choose the grade/],
    ['checked without which', { grade: 'checked', checkedOn: '2026-01-01' }, 'checkedAgainst', /with what/],
    ['checked without when', { grade: 'checked', checkedAgainst: 'MM-1' }, 'checkedOn', /which day/],
    ['accuracy without a unit', { 'accuracy.current_rest': '0.5' }, 'accuracy.current_rest', /Say the unit/],
    [
      'accuracy in a unit that does not fit',
      { 'accuracy.current_rest': '1 dB' },
      'accuracy.current_rest',
      /does not fit/,
    ],
    [
      'step that is a sum',
      { 'resolution.current_rest': '1 mA + 1 mA' },
      'resolution.current_rest',
      /one number/,
    ],
    ['quantity that nothing reads', { 'accuracy.efficiency': '1 %' }, 'accuracy.efficiency', /no quantity/],
    ['linearity', { linearityDb: 'good' }, 'linearityDb', /number of dB/],
    ['standing wave ratio', { vswr: '0.9' }, 'vswr', /1 or more/],
    ['detector without its drop', { tapRatio: '2' }, 'dropV', /drop of the diode/],
    ['accredited without uncertainty', { calibrationU: '' }, 'calibrationU', /expanded uncertainty/],
    ['accredited without a due day', { dueOn: '' }, 'dueOn', /day on which/],
    ['a day that is none', { dueOn: '2027-02-30' }, 'dueOn', /Write the day/],
    ['due before calibrated', { dueOn: '2025-01-01' }, 'dueOn', /before it was calibrated/],
    ['k', { calibrationK: '-2' }, 'calibrationK', /coverage factor/],
    [
      'a certificate that is text',
      { certificateFile: new File(['%!PS'], 'a.pdf') },
      'certificateFile',
      /no PDF, PNG or JPEG/,
    ],
    [
      'a certificate that is too large',
      { certificateFile: pdf('big.pdf', 8 * 1024 * 1024) },
      'certificateFile',
      /larger than 8 MB/,
    ],
  ])('is refused beside its field: %s', async (_, change, field, sentence) => {
    const { response } = await enter(change);
    const problem = await problemIn(response);
    expect(problem['fields']).toHaveProperty([field]);
    expect((problem['fields'] as Record<string, string>)[field]).toMatch(sentence);
    expect(await database.db.select().from(instruments)).toEqual([]);
    expect(await database.db.select().from(files)).toEqual([]);
  });

  test('comes back with what was typed where it was refused', async () => {
    await callDoor(createDoor, {
      person: tester,
      body: filledIn({ 'accuracy.current_rest': '1 dB' }),
      headers: browser,
    });
    const [kept] = await database.db.select().from(formReturns);
    expect(kept?.values).toMatchObject({
      'accuracy.current_rest': '1 dB',
      laboratory: 'Northmoor Metrology',
    });
    expect(kept?.fields).toHaveProperty(['accuracy.current_rest']);
  });

  test('is refused where the number is taken, and to a builder, a shipper, a stranger', async () => {
    await enter();
    expect(await problemIn((await enter()).response)).toMatchObject({
      status: 409,
      fields: { number: 'There is an instrument MM-7 already.' },
    });
    const statuses = [];
    for (const person of [await personOf('builder'), await personOf('shipper'), null]) {
      statuses.push((await enter({}, person)).response.status);
    }
    expect(statuses).toEqual([403, 403, 401]);
  });
});

describe('the certificate of a calibration', () => {
  const read = async (person: SignedIn | null, revision = '1') =>
    callDoor(fileDoor, {
      method: 'GET',
      person,
      params: { id: String(await idOf('MM-7')), revision },
    });

  test('is given to staff of the bench as what it is by its content', async () => {
    await enter({ certificateFile: new File(['%PDF-1.7 x'], 'page.html', { type: 'text/html' }) });
    const { response } = await read(await personOf('builder'));
    expect(response.headers.get('content-type')).toBe('application/pdf');
    expect(response.headers.get('content-security-policy')).toBe("default-src 'none'; sandbox");
    expect(await response.text()).toBe('%PDF-1.7 x');
    expect((await read(await personOf('shipper'))).response.status).toBe(403);
    expect((await read(null)).response.status).toBe(401);
  });

  test('is not there where none was sent', async () => {
    await enter();
    expect((await read(tester)).response.status).toBe(404);
  });

  test('stays with the next revision while the calibration is the same, and goes with it', async () => {
    await enter({ certificateFile: pdf() });
    const params = { id: String(await idOf('MM-7')) };
    await callDoor(reviseDoor, { person: tester, params, body: filledIn({ name: 'Bench multimeter' }) });
    expect((await newestOf('MM-7'))?.fileName).toBe('nm-4711.pdf');
    await callDoor(reviseDoor, { person: tester, params, body: filledIn({ certificateNumber: 'NM-4712' }) });
    expect((await newestOf('MM-7'))?.fileName).toBeNull();
    await callDoor(reviseDoor, {
      person: tester,
      params,
      body: filledIn({ certificateNumber: 'NM-4712', certificateFile: pdf('nm-4712.pdf', 65) }),
    });
    expect(await newestOf('MM-7')).toMatchObject({ revision: 4, fileName: 'nm-4712.pdf' });
  });
});

describe('two who revise at once', () => {
  test('do not undo each other: the second is told', async () => {
    const { instrumentId } = await createInstrument(
      { number: 'SA-9', name: 'Analyser', spec: buildInstrumentSpec() },
      callAs(database.db, tester.id),
    );
    const revise = (name: string) =>
      reviseInstrument(
        { instrumentId, name, spec: buildInstrumentSpec(), seen: 1 },
        callAs(database.db, tester.id),
      );
    const results = await Promise.allSettled([revise('one'), revise('other')]);
    const refused = results.filter((result) => result.status === 'rejected');
    expect(refused).toHaveLength(1);
    expect(String(refused[0]?.reason)).toMatch(/Somebody has made revision 2 of SA-9/);
    const kept = await database.db
      .select()
      .from(instrumentRevisions)
      .orderBy(asc(instrumentRevisions.revision));
    expect(kept.map(({ revision, retiredAt }) => [revision, retiredAt === null])).toEqual([
      [1, false],
      [2, true],
    ]);
  });
});

describe('taking an instrument out of use', () => {
  test('leaves it in the list of all, and puts it back as its next revision', async () => {
    await enter({ certificateFile: pdf() });
    const params = { id: String(await idOf('MM-7')) };
    expect((await callDoor(retireDoor, { person: tester, params })).response.status).toBe(200);
    expect(await listInstruments(database.db)).toEqual([]);
    const [listed] = await listEveryInstrument(database.db);
    expect(listed).toMatchObject({ number: 'MM-7', revision: 1 });
    expect(listed?.retiredAt).not.toBeNull();
    expect(await problemIn((await callDoor(retireDoor, { person: tester, params })).response)).toMatchObject({
      status: 409,
      detail: 'MM-7 is out of use already.',
    });

    expect((await callDoor(returnDoor, { person: tester, params })).response.status).toBe(200);
    expect(await listInstruments(database.db)).toMatchObject([{ number: 'MM-7', revision: 2 }]);
    expect(await newestOf('MM-7')).toMatchObject({ fileName: 'nm-4711.pdf' });
    expect((await callDoor(returnDoor, { person: tester, params })).response.status).toBe(409);
    const actions = await database.db.select({ action: ledgerEntries.action }).from(ledgerEntries);
    expect(actions.map(({ action }) => action)).toEqual([
      'instrument.create',
      'instrument.retire',
      'instrument.return',
    ]);
  });

  test('is not for a builder', async () => {
    await enter();
    const params = { id: String(await idOf('MM-7')) };
    const builder = await personOf('builder');
    expect((await callDoor(retireDoor, { person: builder, params })).response.status).toBe(403);
  });
});
