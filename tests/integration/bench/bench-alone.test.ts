import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { POST as equip } from '~/pages/api/equipment';
import { POST as drawUp } from '~/pages/api/models';
import { POST as enter } from '~/pages/api/units';
import { parsePanel } from '~/schemas/catalog-panel';
import type { SignedIn } from '~/server/auth/sessions';
import {
  instrumentRevisions,
  ledgerEntries,
  models,
  options,
  pathRevisions,
  signingKeys,
  testPlanRevisions,
  testPoints,
  testRuns,
  units,
} from '~/server/db/schema';
import { readBeginning } from '~/server/queries/bench/list-testable-models';
import { readWorksUse } from '~/server/queries/office/read-works-use';
import { listRigs } from '~/server/queries/catalog/read-rig';
import { listToDo } from '~/server/queries/office/list-to-do';
import { openRun } from '~/server/services/bench/open-run';
import { callAs } from '../../factories/bench';
import { seedWorks } from '../../factories/catalog';
import { seedPerson } from '../../factories/people';
import { callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let owner: SignedIn;

beforeEach(async () => {
  await seedWorks(database.db);
  const id = await seedPerson(database.db, { name: 'Mara Quill', roles: ['owner'] });
  owner = { id, name: 'Mara Quill', email: 'mara@thistledown.example', callSign: null, roles: ['owner'] };
});

const small = {
  name: 'Holm 3',
  ratedPower: '5 W',
  supplyV: '13,8',
  bands: ['40m', '20m'],
  measure: ['harmonic_2', 'check'],
  keyDown: '900 mA',
};

async function post(door: typeof drawUp, body: unknown, person: SignedIn = owner) {
  const { response } = await callDoor(door, { ...sendJson(body), person });
  return response;
}

async function drawn(changes: Record<string, unknown> = {}): Promise<string> {
  const response = await post(drawUp, { ...small, ...changes });
  expect(response.status).toBe(200);
  const { slug } = (await response.json()) as { slug: string };
  return slug;
}

describe('a model in its smallest form', () => {
  it('has a released test plan, with limits read in their own units, and is not in the shop', async () => {
    expect(await drawn()).toBe('holm-3');
    const [model] = await database.db.select().from(models);
    expect(model).toMatchObject({ state: 'draft', serialPrefix: 'H3', ratedPowerW: 5 });
    expect(parsePanel(model?.panel).lamps.map(({ label }) => label)).toEqual(['40', '20']);
    expect(await listRigs(database.db, '2027-03-01')).toEqual([]);
    const [plan] = await database.db.select().from(testPlanRevisions);
    expect(plan).toMatchObject({ letter: 'A', state: 'released', supplyV: 13.8, releasedBy: owner.id });
    const points = await database.db.select().from(testPoints).orderBy(testPoints.position);
    expect(points.map(({ band, quantityKey, upperLimit }) => [band, quantityKey, upperLimit])).toEqual([
      ['40m', 'rf_power', 6.29],
      ['40m', 'harmonic_2', null],
      ['40m', 'current_key_down', 0.9],
      ['20m', 'rf_power', 6.29],
      ['20m', 'harmonic_2', null],
      ['20m', 'current_key_down', 0.9],
      [null, 'check', null],
    ]);
  });

  it('offers its bands as options where not every rig has all of them', async () => {
    await drawn({ bandsVary: 'on' });
    const keys = await database.db.select({ key: options.key }).from(options).orderBy(options.position);
    expect(keys.map(({ key }) => key)).toEqual(['band.40m', 'band.20m']);
    const points = await database.db.select().from(testPoints).where(eq(testPoints.band, '20m'));
    expect(points.every(({ condition }) => condition === 'band.20m')).toBe(true);
  });

  it.each([
    [{ name: '…' }, 'name', 400],
    [{ name: 'New' }, 'name', 409],
    [{ bands: [] }, 'bands', 400],
    [{ ratedPower: 'five' }, 'ratedPower', 400],
    [{ ratedPower: '5 A' }, 'ratedPower', 400],
    [{ keyDown: '900' }, 'keyDown', 400],
    [{ supplyV: '' }, 'supplyV', 400],
  ])('refuses %j beside its field', async (changes, field, status) => {
    const response = await post(drawUp, { ...small, ...changes });
    expect(response.status).toBe(status);
    expect((await problemIn(response))['fields']).toHaveProperty(field);
    expect(await database.db.$count(models)).toBe(0);
  });

  it('refuses a name that is taken, and numbers another of the same letters otherwise', async () => {
    await drawn();
    expect((await post(drawUp, small)).status).toBe(409);
    await drawn({ name: 'Hill 3' });
    const prefixes = await database.db.select({ prefix: models.serialPrefix }).from(models);
    expect(prefixes.map(({ prefix }) => prefix)).toEqual(['H3', 'H3Z2']);
  });

  it('is the owner’s to draw up', async () => {
    const tester: SignedIn = { ...owner, roles: ['tester'] };
    expect((await post(drawUp, small, tester)).status).toBe(403);
  });
});

describe('a unit by its serial number', () => {
  it('is at its final test, with a run open for where it goes', async () => {
    const model = await drawn();
    const response = await post(enter, { model, serial: 'h3 - 0147', destination: 'us' });
    expect(response.status).toBe(200);
    expect(await response.json()).toMatchObject({ serial: 'H3-0147', runNo: 1 });
    const [unit] = await database.db.select().from(units);
    expect(unit).toMatchObject({
      ...{ stage: 'final_test', batchId: null, orderLineId: null, bomRevisionId: null, options: [] },
    });
    const [run] = await database.db.select().from(testRuns);
    expect(run).toMatchObject({ state: 'open', destinationCountry: 'US', testerUserId: owner.id });
    expect(await readWorksUse(database.db)).toEqual({ hasPart: false, hasBatch: false, hasOrder: false });
  });

  it('keeps its destination for the next run, and has the strictest rules where none was said', async () => {
    const model = await drawn();
    await post(enter, { model, serial: 'H3-0001', destination: 'AT' });
    await post(enter, { model, serial: 'H3-0002', destination: '' });
    await database.db.update(testRuns).set({ state: 'closed' });
    await openRun({ serial: 'H3-0001' }, callAs(database.db, owner.id));
    await openRun({ serial: 'H3-0002' }, callAs(database.db, owner.id));
    const runs = await database.db.select().from(testRuns).where(eq(testRuns.runNo, 2));
    expect(runs.map(({ destinationCountry }) => destinationCountry)).toEqual(['AT', null]);
  });

  it.each([
    [{ serial: '' }, 'serial', 400],
    [{ serial: 'H3/0147' }, 'serial', 400],
    [{ serial: 'HOLM' }, 'serial', 400],
    [{ destination: 'ZZ' }, 'destination', 400],
    [{ option: ['band.20m'] }, 'option', 400],
    [{ model: '' }, 'model', 400],
  ])('refuses %j beside its field', async (changes, field, status) => {
    const response = await post(enter, { model: await drawn(), serial: 'H3-0147', ...changes });
    expect(response.status).toBe(status);
    expect((await problemIn(response))['fields']).toHaveProperty(field);
    expect(await database.db.$count(units)).toBe(0);
    expect(await database.db.$count(testRuns)).toBe(0);
  });

  it('refuses a serial number that is taken, also as it is read from a label', async () => {
    const model = await drawn();
    await post(enter, { model, serial: 'H3-0147' });
    const response = await post(enter, { model, serial: 'H3-O147' });
    expect(response.status).toBe(409);
    expect((await problemIn(response))['fields']).toHaveProperty('serial');
    expect(await database.db.$count(testRuns)).toBe(1);
  });

  it('asks for a choice of bands that can be built', async () => {
    const model = await drawn({ bandsVary: true });
    expect((await post(enter, { model, serial: 'H3-1', option: [] })).status).toBe(400);
    expect((await post(enter, { model, serial: 'H3-1', option: 'band.20m' })).status).toBe(200);
    const [unit] = await database.db.select().from(units);
    expect(unit?.options).toEqual(['band.20m']);
  });

  it('waits for a released test plan', async () => {
    const model = await drawn();
    await database.db.update(testPlanRevisions).set({ state: 'retired' });
    const response = await post(enter, { model, serial: 'H3-0147' });
    expect(response.status).toBe(409);
    expect((await problemIn(response))['detail']).toBe(
      'No test plan of Holm 3 is released: release one first.',
    );
  });

  it('is a tester’s to enter, not a builder’s', async () => {
    const body = { model: await drawn(), serial: 'H3-0147' };
    expect((await post(enter, body, { ...owner, roles: ['builder'] })).status).toBe(403);
    expect((await post(enter, body, { ...owner, roles: ['tester'] })).status).toBe(200);
  });

  it('waits for the tester on the list of what to do, and for nobody to pack it', async () => {
    await post(enter, { model: await drawn(), serial: 'H3-0147' });
    const what = async () => (await listToDo(database.db, ['owner'], 10)).rows.map(({ what: deed }) => deed);
    expect(await what()).toEqual(['Go on testing']);
  });
});

describe('what is measured with, in its shortest form', () => {
  const meter = { name: 'Power meter', levelDb: '0,5', attenuationDb: '40', ratingW: '50', ratioDb: '1.5' };

  it('is an unchecked instrument and a path before it', async () => {
    const response = await post(equip, meter);
    expect(await response.json()).toEqual({ instrumentNumber: 'M-1', pathNumber: 'P-1' });
    const [instrument] = await database.db.select().from(instrumentRevisions);
    expect(instrument?.spec).toMatchObject({
      grade: 'unchecked',
      quantities: { rf_power: { accuracy: [{ halfWidth: 0.5, unit: 'dB' }] } },
      linearityDb: 1.5,
      calibration: null,
    });
    const [path] = await database.db.select().from(pathRevisions);
    expect(path?.spec).toMatchObject({
      parts: [
        {
          ratingW: 50,
          loss: [
            [1e6, 40],
            [1e9, 40],
          ],
        },
      ],
    });
  });

  it('has no path where nothing lies before it, and the next number', async () => {
    await post(equip, meter);
    const response = await post(equip, { ...meter, attenuationDb: 0 });
    expect(await response.json()).toEqual({ instrumentNumber: 'M-2', pathNumber: null });
  });

  it.each([
    [{ levelDb: '' }, 'levelDb'],
    [{ levelDb: '-1' }, 'levelDb'],
    [{ attenuationDb: 'forty' }, 'attenuationDb'],
    [{ name: ' ' }, 'name'],
  ])('refuses %j beside its field', async (changes, field) => {
    const response = await post(equip, { ...meter, ...changes });
    expect(response.status).toBe(400);
    expect((await problemIn(response))['fields']).toHaveProperty(field);
  });
});

it('the way to the first certificate is known step by step', async () => {
  const steps = () => readBeginning(database.db);
  expect(await steps()).toEqual({ hasModel: false, hasInstrument: false, hasUnit: false });
  const model = await drawn();
  expect(await steps()).toEqual({ hasModel: true, hasInstrument: false, hasUnit: false });
  await post(equip, { name: 'Power meter', levelDb: 0.5, attenuationDb: 40 });
  await post(enter, { model, serial: 'H3-0147' });
  expect(await steps()).toEqual({ hasModel: true, hasInstrument: true, hasUnit: true });
  expect(await database.db.$count(signingKeys)).toBe(0);
  const actions = await database.db.select({ action: ledgerEntries.action }).from(ledgerEntries);
  expect(actions.map(({ action }) => action)).toEqual([
    'test_plan.release',
    'model.draw_up',
    'instrument.create',
    'path_part.create',
    'path.create',
    'bench.equip',
    'run.open',
    'unit.enter',
  ]);
});
