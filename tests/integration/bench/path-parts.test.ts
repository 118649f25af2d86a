import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import { letIn } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { pathParts, pathRevisions, paths } from '~/server/db/schema';
import { listPaths } from '~/server/queries/bench/list-equipment';
import { getPathPart } from '~/server/queries/bench/read-path-part';
import { getSignalPath } from '~/server/queries/bench/read-signal-path';
import { revisePath } from '~/server/services/bench/revise-path';
import { revisePathPart } from '~/server/services/bench/revise-path-part';
import { GET as fileDoor } from '~/pages/api/path-parts/[id]/files/[revision]';
import { POST as retirePartDoor } from '~/pages/api/path-parts/[id]/retirement';
import { POST as returnPartDoor } from '~/pages/api/path-parts/[id]/return';
import { POST as revisePartDoor } from '~/pages/api/path-parts/[id]/revisions';
import { POST as partDoor } from '~/pages/api/path-parts/index';
import { POST as retirePathDoor } from '~/pages/api/paths/[id]/retirement';
import { POST as returnPathDoor } from '~/pages/api/paths/[id]/return';
import { POST as revisePathDoor } from '~/pages/api/paths/[id]/revisions';
import { POST as pathDoor } from '~/pages/api/paths/index';
import { callAs } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { browser, callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let tester: SignedIn;
let builder: SignedIn;

beforeEach(async () => {
  tester = await personOf('tester');
  builder = await personOf('builder');
});

async function personOf(role: 'tester' | 'builder'): Promise<SignedIn> {
  const found = await letIn(await seedPerson(database.db, { name: `Quill ${role}`, roles: [role] }));
  if (found === null) throw new Error('The person is shut out.');
  return found;
}

function partForm(change: Record<string, string | File> = {}): FormData {
  const form = new FormData();
  const fields = {
    ...{ number: 'A-10', name: '10 dB pad', lossTable: '1 MHz 10\n300 MHz 10.1', uncertaintyDb: '0,1' },
    ...{ k: '', flatnessDb: '', ratingW: '2', vswr: '' },
    ...change,
  };
  for (const [name, value] of Object.entries(fields)) form.set(name, value);
  return form;
}

const enterPart = (change: Record<string, string | File> = {}, person: SignedIn = tester) =>
  callDoor(partDoor, { person, body: partForm(change) });

async function buildPath(parts: string[], change: Record<string, unknown> = {}) {
  return callDoor(pathDoor, {
    person: tester,
    ...sendJson({ number: 'T-9', name: 'Tap and pad', parts, ...change }),
  });
}

async function partId(number: string): Promise<string> {
  const [row] = await database.db.select().from(pathParts).where(eq(pathParts.number, number));
  return String(row?.id);
}

async function pathId(number: string): Promise<string> {
  const [row] = await database.db.select().from(paths).where(eq(paths.number, number));
  return String(row?.id);
}

const fieldsOf = async (response: Response) =>
  (await problemIn(response))['fields'] as Record<string, string> | undefined;

const s2p = '# MHz S DB R 50\n1 -30 0 -10.02 0 -10.02 0 -30 0\n300 -20.828 0 -10.3 0 -10.3 0 -30 0\n';

describe('a path part', () => {
  test('is entered as typed', async () => {
    expect((await enterPart()).response.status).toBe(200);
    expect((await getPathPart(database.db, 'a-10'))?.newest).toMatchObject({
      revision: 1,
      fileName: null,
      spec: {
        ...{ partNumber: 'A-10', uncertaintyDb: 0.1, k: 2, flatnessDb: null, ratingW: 2, vswr: null },
        loss: [
          [1e6, 10],
          [300e6, 10.1],
        ],
      },
    });
  });

  test('is read from a Touchstone file, which is kept', async () => {
    await enterPart({ lossTable: '', lossFile: new File([s2p], 'pad.s2p') });
    const found = await getPathPart(database.db, 'A-10');
    expect(found?.newest.fileName).toBe('pad.s2p');
    expect(found?.newest.spec.loss.map(([, lossDb]) => lossDb)).toEqual([10.02, 10.3]);
    expect(found?.newest.spec.vswr).toBeCloseTo(1.2, 3);
    const params = { id: await partId('A-10'), revision: '1' };
    const { response } = await callDoor(fileDoor, { method: 'GET', person: builder, params });
    expect(await response.text()).toBe(s2p);
    expect((await callDoor(fileDoor, { method: 'GET', params })).response.status).toBe(401);
  });

  test('takes no loss from a file of one port, only its standing wave ratio, and says so', async () => {
    const lossFile = new File(['# MHz S DB\n1 -30 0\n60 -26.444 0\n'], 'pad.s1p');
    const refused = await enterPart({ lossTable: '', lossFile });
    expect((await fieldsOf(refused.response))?.['lossTable']).toMatch(/return loss.*Type the loss/);
    expect(await database.db.select().from(pathParts)).toEqual([]);
    const { response } = await enterPart({ lossFile, vswr: '3' });
    expect(JSON.stringify(await response.json())).toMatch(/return loss/);
    expect((await getPathPart(database.db, 'A-10'))?.newest.spec.vswr).toBeCloseTo(1.1, 3);
  });

  test.each([
    ['an empty table', { lossTable: '' }, 'lossTable', /no rows/],
    ['frequencies that fall', { lossTable: '7 MHz 1\n3 MHz 1' }, 'lossTable', /^Line 2 goes back/],
    ['no unit', { lossTable: '7 1' }, 'lossTable', /^Line 1 does not say the unit/],
    [
      'a file that is a picture',
      { lossFile: new File([new Uint8Array([0x89, 0x50, 0, 0, 0, 0])], 'a.csv') },
      'lossFile',
      /not text/,
    ],
    [
      'a file with NaN',
      { lossFile: new File(['MHz,loss\n1,NaN'], 'a.csv') },
      'lossFile',
      /“a\.csv”: Line 2: “NaN”/,
    ],
    [
      'a file that is too large',
      { lossFile: new File(['!'.repeat(1024 * 1024 + 1)], 'a.csv') },
      'lossFile',
      /larger than 1 MB/,
    ],
    ['no uncertainty', { uncertaintyDb: '' }, 'uncertaintyDb', /uncertainty of the loss/],
    ['a rating of nothing', { ratingW: '0' }, 'ratingW', /above 0/],
    ['a standing wave ratio under 1', { vswr: '0.5' }, 'vswr', /1 or more/],
  ])('is refused beside its field: %s', async (_, change, field, sentence) => {
    const fields = await fieldsOf((await enterPart(change)).response);
    expect(fields?.[field]).toMatch(sentence);
    expect(await database.db.select().from(pathParts)).toEqual([]);
  });

  test('is refused where its number is taken, and to a builder', async () => {
    await enterPart();
    expect((await fieldsOf((await enterPart()).response))?.['number']).toMatch(/A-10 already/);
    expect((await enterPart({ number: 'A-11' }, builder)).response.status).toBe(403);
  });
});

describe('a path', () => {
  beforeEach(async () => {
    await enterPart();
    await enterPart({ number: 'L-50', name: 'Load', lossTable: '1 MHz 40\n300 MHz 40' });
  });

  test('is a picture of its parts in order', async () => {
    expect((await buildPath(['l-50', 'A-10'])).response.status).toBe(200);
    const found = await getSignalPath(database.db, 'T-9');
    expect(found?.newest.spec.direction).toBe('to_instrument');
    expect(found?.newest.spec.parts.map(({ partNumber, name }) => [partNumber, name])).toEqual([
      ['L-50', 'Load'],
      ['A-10', '10 dB pad'],
    ]);
  });

  test('takes the form’s list, and leaves out what is not chosen', async () => {
    const body = new URLSearchParams({ number: 'T-9', name: 'Load alone', direction: 'from_generator' });
    for (const part of ['', 'L-50', '']) body.append('parts', part);
    const { response } = await callDoor(pathDoor, {
      person: tester,
      body,
      headers: { ...browser, 'content-type': 'application/x-www-form-urlencoded' },
    });
    expect(response.headers.get('location')).toBe('/works/paths/T-9');
    expect((await getSignalPath(database.db, 'T-9'))?.newest.spec).toMatchObject({
      direction: 'from_generator',
      parts: [{ partNumber: 'L-50' }],
    });
  });

  test.each([
    ['no part', [''], {}, 'parts.0', /at least one part/],
    ['a part twice', ['L-50', 'L-50'], {}, 'parts.1', /twice/],
    ['a part that is not there', ['L-50', 'X-1'], {}, 'parts.1', /X-1 is no path part in use/],
    ['a way that is none', ['L-50'], { direction: 'up' }, 'direction', /which way/],
  ])('is refused beside its field: %s', async (_, parts, change, field, sentence) => {
    expect((await fieldsOf((await buildPath(parts, change)).response))?.[field]).toMatch(sentence);
    expect(await database.db.select().from(paths)).toEqual([]);
  });

  test('gets its next revision with each part that it holds, and no other path does', async () => {
    await buildPath(['L-50', 'A-10']);
    await buildPath(['L-50'], { number: 'T-8' });
    const { response } = await callDoor(revisePartDoor, {
      person: tester,
      params: { id: await partId('A-10') },
      body: partForm({ lossTable: '1 MHz 9.9\n300 MHz 9.9', seen: '1' }),
    });
    expect(await response.json()).toMatchObject({ revision: 2, paths: ['T-9'] });
    const found = await getSignalPath(database.db, 'T-9');
    expect(found?.newest.revision).toBe(2);
    expect(found?.newest.spec.parts[1]?.loss[0]).toEqual([1e6, 9.9]);
    expect(found?.revisions[1]?.spec.parts[1]?.loss[0]).toEqual([1e6, 10]);
    expect((await getSignalPath(database.db, 'T-8'))?.newest.revision).toBe(1);
  });

  test('is left alone where the part’s revision is refused', async () => {
    await buildPath(['L-50', 'A-10']);
    await callDoor(revisePartDoor, {
      person: tester,
      params: { id: await partId('A-10') },
      body: partForm({ lossTable: 'none' }),
    });
    expect((await getSignalPath(database.db, 'T-9'))?.newest.revision).toBe(1);
    expect((await getPathPart(database.db, 'A-10'))?.newest.revision).toBe(1);
  });

  test('holds the newest of each part whichever of two revisers comes first', async () => {
    await buildPath(['L-50', 'A-10']);
    const ctx = callAs(database.db, tester.id);
    const pad = { name: '10 dB pad', uncertaintyDb: 0.1, k: 2, flatnessDb: null, ratingW: 2, vswr: null };
    await Promise.all([
      revisePathPart(
        { ...pad, pathPartId: Number(await partId('A-10')), lossTable: '1 MHz 9\n300 MHz 9' },
        ctx,
      ),
      revisePath(
        {
          ...{ pathId: Number(await pathId('T-9')), name: 'Pad first', direction: 'to_instrument' },
          parts: ['A-10', 'L-50'],
        },
        ctx,
      ),
    ]);
    const [path] = await listPaths(database.db);
    expect(path?.spec.parts.map(({ partNumber }) => partNumber)).toEqual(['A-10', 'L-50']);
    expect(path?.spec.parts[0]?.loss[0]).toEqual([1e6, 9]);
    const inUse = (await database.db.select().from(pathRevisions)).filter(
      ({ retiredAt }) => retiredAt === null,
    );
    expect(inUse).toHaveLength(1);
  });

  test('tells the second of two revisers', async () => {
    await buildPath(['L-50']);
    const revise = async (parts: string[]) =>
      callDoor(revisePathDoor, {
        person: tester,
        params: { id: await pathId('T-9') },
        ...sendJson({ name: 'Tap', parts, seen: 1 }),
      });
    expect((await revise(['L-50', 'A-10'])).response.status).toBe(200);
    expect(await problemIn((await revise(['A-10'])).response)).toMatchObject({ status: 409 });
  });

  test('keeps its parts in use, and goes out of use and back with them as they are then', async () => {
    await buildPath(['L-50', 'A-10']);
    const [pad, path] = [{ id: await partId('A-10') }, { id: await pathId('T-9') }];
    const ask = (door: typeof retirePathDoor, params: { id: string }, person = tester) =>
      callDoor(door, { person, params });
    expect(await problemIn((await ask(retirePartDoor, pad)).response)).toMatchObject({
      status: 409,
      detail: 'A-10 is part of T-9. Take it out of there, or that out of use, first.',
    });
    expect((await ask(retirePathDoor, path, builder)).response.status).toBe(403);
    expect((await ask(retirePathDoor, path)).response.status).toBe(200);
    expect(await listPaths(database.db)).toEqual([]);
    expect((await ask(retirePartDoor, pad)).response.status).toBe(200);
    expect((await fieldsOf((await ask(returnPathDoor, path)).response))?.['parts.1']).toMatch(
      /no path part in use/,
    );
    expect((await ask(returnPartDoor, pad)).response.status).toBe(200);
    await callDoor(revisePartDoor, {
      person: tester,
      params: pad,
      body: partForm({ lossTable: '1 MHz 8\n300 MHz 8' }),
    });
    expect((await ask(returnPathDoor, path)).response.status).toBe(200);
    expect((await listPaths(database.db))[0]?.spec.parts[1]?.loss[0]).toEqual([1e6, 8]);
  });
});
