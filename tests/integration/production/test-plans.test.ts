import { asc, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { POST as drawUp } from '~/pages/api/models';
import { POST as release } from '~/pages/api/models/[slug]/releases';
import { POST as draft } from '~/pages/api/models/[slug]/test-plans';
import { POST as save } from '~/pages/api/models/[slug]/test-plans/[letter]';
import { emptyLine, writePlanLine } from '~/domain/bench/plan-lines';
import type { PlanLine } from '~/domain/bench/plan-lines';
import type { SignedIn } from '~/server/auth/sessions';
import { testPlanRevisions, testPoints } from '~/server/db/schema';
import { readTestPlan } from '~/server/queries/bench/read-test-plan';
import type { TestPlan } from '~/server/queries/bench/read-test-plan';
import { seedWorks } from '../../factories/catalog';
import { seedPerson } from '../../factories/people';
import { browser, callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let owner: SignedIn;
const slug = 'holm-3';

beforeEach(async () => {
  await seedWorks(database.db);
  const id = await seedPerson(database.db, { name: 'Mara Quill', roles: ['owner'] });
  owner = { id, name: 'Mara Quill', email: 'mara@thistledown.example', callSign: null, roles: ['owner'] };
  const model = { name: 'Holm 3', ratedPower: '5 W', supplyV: 13.8, bands: ['40m'], measure: ['harmonic_2'] };
  await callDoor(drawUp, { ...sendJson(model), person: owner });
});

async function planOf(letter: string): Promise<TestPlan> {
  const plan = await readTestPlan(database.db, slug, letter);
  if (plan === null) throw new Error(`There is no plan ${letter}.`);
  return plan;
}

async function drafted(): Promise<TestPlan> {
  const { response } = await callDoor(draft, { params: { slug }, person: owner });
  expect(response.status).toBe(200);
  return planOf('B');
}

async function sent(plan: TestPlan, changes: Record<string, unknown>, person = owner) {
  const { stamp, note, supplyV, loadOhm } = plan;
  const lines = plan.points.map(writePlanLine);
  const { response } = await callDoor(save, {
    ...sendJson({ stamp, note, supplyV, loadOhm, lines, ...changes }),
    params: { slug, letter: plan.letter },
    person,
  });
  return response;
}

const row = (changes: Partial<PlanLine>): PlanLine => ({ ...emptyLine, ...changes });

describe('a draft', () => {
  it('is a copy of the newest, one at a time, and the owner’s', async () => {
    const plan = await drafted();
    expect(plan.points.map(writePlanLine)).toEqual((await planOf('A')).points.map(writePlanLine));
    const again = await callDoor(draft, { params: { slug }, person: owner });
    expect(again.response.status).toBe(409);
    expect((await problemIn(again.response))['detail']).toMatch(/B is a draft already/);
    const tester = await callDoor(draft, { params: { slug }, person: { ...owner, roles: ['tester'] } });
    expect(tester.response.status).toBe(403);
  });

  it('is saved whole, with limits in the units of their quantities', async () => {
    const plan = await drafted();
    const response = await sent(plan, {
      note: 'With a heat check',
      supplyV: '12,0',
      devices: '2',
      thetaKPerW: '26',
      duty: '50',
      lines: [
        row({ quantity: 'rf_power', band: '40m', freq: '7030', lower: '4 W', upper: '38 dBm' }),
        row({
          quantity: 'harmonic_2',
          band: '40m',
          freq: '7.030 MHz',
          upper: '50',
          limitRule: 'spurious',
          decision: 'guarded',
        }),
        row({ quantity: 'current_key_down', band: '40m', freq: '7030', upper: '900 mA', supply: '13.8' }),
        row({
          quantity: 'sensitivity',
          band: '40m',
          freq: '7030',
          upper: '−130 dBm',
          method: '10 dB (S+N)/N in 500 Hz',
          required: 'no',
        }),
        row({}),
      ],
    });
    expect(await response.json()).toMatchObject({ letter: 'B', points: 4 });
    const saved = await planOf('B');
    expect(saved).toMatchObject({
      ...{ note: 'With a heat check', supplyV: 12 },
      outputStage: { devices: 2, thetaKPerW: 26, duty: 0.5, hasSink: false },
    });
    const rows = await database.db
      .select()
      .from(testPoints)
      .where(eq(testPoints.testPlanRevisionId, saved.id))
      .orderBy(asc(testPoints.position));
    expect(
      rows.map(({ position, lowerLimit, upperLimit, supplyV, required }) => ({
        position,
        lowerLimit,
        upperLimit,
        supplyV,
        required,
      })),
    ).toEqual([
      {
        position: 1,
        lowerLimit: 4,
        upperLimit: expect.closeTo(6.3096, 4) as number,
        supplyV: null,
        required: true,
      },
      { position: 2, lowerLimit: null, upperLimit: -50, supplyV: null, required: true },
      { position: 3, lowerLimit: null, upperLimit: 0.9, supplyV: 13.8, required: true },
      { position: 4, lowerLimit: null, upperLimit: -130, supplyV: null, required: false },
    ]);
    expect(rows.at(3)?.method).toBe('10 dB (S+N)/N in 500 Hz');
  });

  it('names every row and field that cannot be used, and changes nothing', async () => {
    const plan = await drafted();
    const response = await sent(plan, {
      lines: [
        row({ quantity: 'rf_power', lower: '4 A' }),
        row({}),
        row({ quantity: 'nothing', condition: 'band.99m' }),
      ],
    });
    expect(response.status).toBe(400);
    const problem = await problemIn(response);
    expect(Object.keys(problem['fields'] as object).sort()).toEqual([
      'lines.0.lower',
      'lines.2.condition',
      'lines.2.quantity',
    ]);
    expect((await planOf('B')).stamp).toBe(plan.stamp);
  });

  it('tells the second of two editors, and takes it once they have seen the other’s', async () => {
    const plan = await drafted();
    expect((await sent(plan, { note: 'mine' })).status).toBe(200);
    const late = await sent(plan, { note: 'yours' });
    expect(late.status).toBe(409);
    expect((await problemIn(late))['detail']).toMatch(
      /Somebody else has changed .* What you typed is still here/,
    );
    expect((await planOf('B')).note).toBe('mine');
    expect((await sent(await planOf('B'), { note: 'yours' })).status).toBe(200);
  });

  it('comes from a plain form too, sorted by the numbers of its rows, and back with what was typed', async () => {
    const plan = await drafted();
    const form = new URLSearchParams({
      stamp: plan.stamp,
      note: '',
      supplyV: '13.8',
      loadOhm: '50',
      devices: '',
      thetaKPerW: '',
      duty: '',
    });
    const lines: (PlanLine & { no: string })[] = [
      { no: '2', ...row({ quantity: 'current_rest', upper: '80 mA' }) },
      { no: '1', ...row({ quantity: 'rf_power', band: '40m', freq: '7030', lower: '4 W' }) },
      { no: '', ...row({}) },
    ];
    for (const line of lines)
      for (const [name, text] of Object.entries<string>({ ...line })) form.append(name, text);
    const call = { params: { slug, letter: 'b' }, person: owner, headers: browser };
    const { response } = await callDoor(save, { ...call, body: form });
    expect(response.headers.get('location')).toBe('/works/models/holm-3/test-plans/b');
    const saved = await planOf('B');
    expect(saved.points.map(({ quantity }) => quantity.key)).toEqual(['rf_power', 'current_rest']);
    form.set('supplyV', 'low');
    const refused = await callDoor(save, { ...call, body: form });
    expect(refused.response.status).toBe(303);
    expect(refused.cookies.has('__Host-form')).toBe(true);
  });

  it.each([
    [{ supplyV: 'x' }, 'supplyV'],
    [{ loadOhm: '' }, 'loadOhm'],
    [{ devices: '', thetaKPerW: '26' }, 'devices'],
    [{ devices: '2', duty: '0' }, 'duty'],
  ])('refuses %j beside its field', async (changes, field) => {
    const response = await sent(await drafted(), changes);
    expect(response.status).toBe(400);
    expect((await problemIn(response))['fields']).toHaveProperty(field);
  });

  it('does not change any more once it is released', async () => {
    const plan = await planOf('A');
    const response = await sent(plan, { note: 'late' });
    expect(response.status).toBe(409);
    expect((await problemIn(response))['detail']).toMatch(/released and does not change/);
  });
});

describe('the release of a test plan', () => {
  const releaseB = async () => {
    const { response } = await callDoor(release, {
      ...sendJson({ kind: 'test_plan', letter: 'B' }),
      params: { slug },
      person: owner,
    });
    return response;
  };

  it('retires the one before', async () => {
    await drafted();
    expect((await releaseB()).status).toBe(200);
    const states = await database.db
      .select({ letter: testPlanRevisions.letter, state: testPlanRevisions.state })
      .from(testPlanRevisions)
      .orderBy(asc(testPlanRevisions.letter));
    expect(states).toEqual([
      { letter: 'A', state: 'retired' },
      { letter: 'B', state: 'released' },
    ]);
  });

  it.each<[string, PlanLine[], RegExp]>([
    [
      'outside its band where the works is',
      [row({ quantity: 'rf_power', band: '40m', freq: '7250', lower: '4 W' })],
      /Point 1: the test frequency is outside 40 m in Region 1/,
    ],
    [
      'with a rule and no power',
      [
        row({
          quantity: 'harmonic_2',
          band: '40m',
          freq: '7030',
          limitRule: 'spurious',
          decision: 'guarded',
        }),
      ],
      /add that power/,
    ],
    ['without a limit', [row({ quantity: 'current_rest' })], /Point 1 has no limit/],
    ['without a point', [], /has no point/],
  ])('is refused %s', async (_, lines, sentence) => {
    expect((await sent(await drafted(), { lines })).status).toBe(200);
    const response = await releaseB();
    expect(response.status).toBe(422);
    expect((await problemIn(response))['detail']).toMatch(sentence);
    expect((await planOf('A')).state).toBe('released');
  });
});
