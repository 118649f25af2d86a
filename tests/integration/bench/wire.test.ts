import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { POST as readingsDoor } from '~/pages/api/bench/readings';
import type { Access } from '~/server/auth/access-tokens';
import { letIn } from '~/server/auth/sessions';
import {
  instrumentRevisions,
  ledgerEntries,
  readings,
  testPlanRevisions,
  testPoints,
  testRuns,
  units,
} from '~/server/db/schema';
import { readStation } from '~/server/queries/bench/read-station';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { reviseInstrument } from '~/server/services/bench/revise-instrument';
import { voidReading } from '~/server/services/bench/void-reading';
import { recordedReadings } from '~/schemas/bench-wire';
import { buildInstrumentSpec, buildPlan, callAs, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let runId: number;
let access: Access & { ok: true };

beforeEach(async () => {
  bench = await seedBench(database.db, [
    ...buildPlan([{ band: '20m', freqHz: 14_060_000 }]),
    {
      ...{ quantityKey: 'spurious', band: '20m', freqHz: 14_060_000, required: false, condition: null },
      ...{ lowerLimit: null, upperLimit: null, limitRule: 'spurious', decision: 'guarded' },
    },
  ]);
  ({ runId } = await openRun({ serial: bench.serial }, bench.ctx));
  access = await accessAs(bench.tester);
});

async function accessAs(userId: number): Promise<Access & { ok: true }> {
  const person = await letIn(userId);
  if (person === null) throw new Error('The person is shut out.');
  return { ok: true, tokenId: 1, scopes: ['readings:write'], person };
}

const power = { quantity: 'rf_power', band: '20m', text: '-6.03 dBm' };
const second = { quantity: 'harmonic_2', band: '20m', text: '51.1 dBc' };

function whole(reading: Record<string, unknown>) {
  return { serial: bench.serial, instrument: 'SA-1', path: 'P-1', ...reading };
}

async function send(
  body: Record<string, unknown> | Record<string, unknown>[],
  { as = access, headers = {} }: { as?: Access & { ok: true }; headers?: Record<string, string> } = {},
): Promise<Response> {
  const sent = Array.isArray(body) ? body.map(whole) : whole(body);
  const { response } = await callDoor(readingsDoor, {
    ...sendJson(sent, headers),
    path: '/api/bench/readings',
    access: as,
    person: as.person,
    now: bench.ctx.now,
  });
  return response;
}

async function accepted(response: Response) {
  const body: unknown = await response.json();
  expect(response.status, JSON.stringify(body)).toBe(200);
  return recordedReadings.parse(body).readings;
}

const problemSchema = z
  .object({ status: z.number(), detail: z.string(), fields: z.record(z.string()).default({}) })
  .passthrough();

async function refused(response: Response) {
  return problemSchema.parse(await problemIn(response));
}

function kept() {
  return database.db.select().from(readings).orderBy(readings.id);
}

describe('a reading that a script sends', () => {
  it('is kept as sent, from the wire, and comes back judged', async () => {
    const [answer] = await accepted(await send(power));
    const [row] = await kept();
    expect(row).toMatchObject({
      ...{ enteredText: '-6.03 dBm', enteredUnit: 'dBm', source: 'wire', readingNo: 1 },
      ...{ testRunId: runId, byUserId: bench.tester, instrumentRevisionId: bench.instrumentRevisionId },
    });
    expect(answer).toMatchObject({
      ...{ serial: 'H3-0147', runNo: 1, quantity: 'rf_power', band: '20m', readingId: row?.id, version: 1 },
      judgement: { verdict: 'pass', unit: 'W', uUnit: 'dB', k: 2, n: 1, lower: 2, upper: null },
    });
    // −6.03 dBm through 40.2 dB.
    expect(answer?.judgement.value).toBeCloseTo(10 ** ((-6.03 + 40.2 - 30) / 10), 9);
    expect(answer?.judgement.U).toBeGreaterThan(0.3);
  });

  it('is judged with all that came in the same request', async () => {
    const answers = await accepted(await send([second, power]));
    expect(answers.map(({ judgement }) => judgement.verdict)).toEqual(['pass', 'pass']);
    expect(answers[0]?.judgement.ruleText).not.toBeNull();
  });

  it('corrects what stands there, or is added with `again`, and the ledger tells it all', async () => {
    await accepted(await send({ ...second, text: '15.1 dBc' }));
    await accepted(await send(second));
    const [third] = await accepted(await send({ ...second, text: '52.1 dBc', again: true }));
    expect(third).toMatchObject({ readingNo: 2, judgement: { n: 2 } });
    const entries = await database.db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.action, 'reading.correct'));
    expect(entries).toHaveLength(1);
    expect(entries[0]).toMatchObject({
      actorUserId: bench.tester,
      details: { from: { text: '15.1 dBc' }, to: { text: '51.1 dBc' }, accessTokenId: 1 },
    });
  });

  it('of a product that is no harmonic names its frequency', async () => {
    await accepted(
      await send([power, { ...second, quantity: 'spurious', text: '62 dBc', productFreqHz: 8.93e6 }]),
    );
    expect((await kept())[1]).toMatchObject({ freqHz: 8.93e6, value: -62 });
    expect((await refused(await send({ ...second, productFreqHz: 8.93e6 }))).fields).toHaveProperty([
      '0.productFreqHz',
    ]);
  });

  it('takes effect once under an Idempotency-Key, and gets the same answer again', async () => {
    const key = { headers: { 'idempotency-key': 'reading-17' } };
    const first = await accepted(await send({ ...second, again: true }, key));
    expect(await accepted(await send({ ...second, again: true }, key))).toEqual(first);
    expect(await kept()).toHaveLength(1);
    expect((await refused(await send({ ...second, text: '50 dBc' }, key))).status).toBe(409);
  });

  it('may come as a form', async () => {
    const { response } = await callDoor(readingsDoor, {
      body: new URLSearchParams(whole({ ...second, again: 'true', freqHz: '14060000' })),
      headers: { 'content-type': 'application/x-www-form-urlencoded' },
      ...{ path: '/api/bench/readings', access, person: access.person, now: bench.ctx.now },
    });
    expect(await accepted(response)).toHaveLength(1);
  });

  it('read with a meter whose calibration fell due yesterday is kept, and stops a legal verdict only', async () => {
    await overdue();
    const [first, other] = await accepted(await send([power, second]));
    expect(first?.judgement.verdict).toBe('pass');
    expect(other?.judgement).toMatchObject({ verdict: 'not_run', n: 1 });
    expect(other?.judgement.stopped).toContain('calibration');
  });

  it('of a unit that goes to a country of no table is judged by the rule for elsewhere', async () => {
    await database.db.update(testRuns).set({ destinationCountry: 'ZZ' }).where(eq(testRuns.id, runId));
    const [, other] = await accepted(await send([power, second]));
    expect(other?.judgement).toMatchObject({ verdict: 'pass' });
    expect(other?.judgement.ruleText).toContain('ITU');
    const station = await readStation(database.db, runId);
    expect(station?.limits.destination).toContain('band edges are not checked');
  });
});

async function overdue(): Promise<void> {
  const [row] = await database.db.select().from(instrumentRevisions);
  const spec = buildInstrumentSpec();
  if (row === undefined || spec.calibration === null) throw new Error('The instrument has no calibration.');
  await reviseInstrument(
    {
      instrumentId: row.instrumentId,
      name: 'Analyser',
      spec: { ...spec, calibration: { ...spec.calibration, dueOn: '2027-03-08' } },
    },
    bench.ctx,
  );
}

describe('a refusal is a problem document and keeps nothing', () => {
  it.each<[string, Record<string, unknown>, number, string, RegExp]>([
    ['an unknown unit', { serial: 'H3-9999' }, 404, '0.serial', /no unit H3-9999/],
    ['an unknown quantity', { quantity: 'loudness' }, 422, '0.quantity', /it asks for rf_power, harmonic_2/],
    ['an unknown band', { band: '11m' }, 400, '0.band', /There is no band 11m/],
    ['a band that the plan has not', { band: '40 m' }, 422, '0.band', /has harmonic_2 on 20m, not on 40m/],
    ['no band', { band: undefined }, 422, '0.band', /not on no band/],
    ['a frequency that is not tested', { freqHz: 14e6 }, 422, '0.freqHz', /in Hz: 14060000/],
    ['an unknown instrument', { instrument: 'XX-9' }, 422, '0.instrument', /No instrument in use/],
    ['no instrument', { instrument: undefined }, 400, '0.instrument', /Say which instrument/],
    ['an unknown path', { path: 'T-99' }, 422, '0.path', /No path in use/],
    ['a bare number', { text: '51.1' }, 422, '0.text', /Send the unit/],
    ['a number instead of text', { text: 51.1 }, 400, '0.text', /as text with its unit/],
    ['a unit that does not fit', { text: '3 W' }, 422, '0.text', /does not fit/],
    ['words', { text: 'rather low dBc' }, 422, '0.text', /./],
    ['an empty text', { text: ' ' }, 400, '0.text', /with its unit/],
    ['not a number', { text: 'NaN dBc' }, 422, '0.text', /./],
    ['infinity', { text: 'Infinity dBc' }, 422, '0.text', /./],
  ])('of %s', async (_, change, status, field, sentence) => {
    const problem = await refused(await send({ ...second, ...change }));
    expect(problem).toMatchObject({ status, instance: 'urn:rigwright:request:request-1' });
    expect(problem.fields).toEqual({ [field]: expect.stringMatching(sentence) as string });
    expect(await kept()).toEqual([]);
  });

  it.each(['0 W', '-3 W', '-0,5 W'])('of a power of %s', async (text) => {
    const problem = await refused(await send({ ...power, text }));
    expect(problem.status).toBe(422);
    expect(await kept()).toEqual([]);
  });

  it('asks about nonsense, and takes it once confirmed', async () => {
    const problem = await refused(await send({ ...power, text: '25 dBm' }));
    expect(problem.fields).toMatchObject({
      '0.confirmed': expect.stringContaining('Is it meant?') as string,
    });
    expect(await kept()).toEqual([]);
    await accepted(await send({ ...power, text: '25 dBm', confirmed: true }));
  });

  it('of one in a list refuses all, each by its place', async () => {
    const problem = await refused(
      await send([power, { ...second, text: '3 W' }, { ...second, quantity: 'loudness' }, second]),
    );
    expect(problem.status).toBe(422);
    expect(problem.detail).toMatch(/^Nothing was recorded: 2 of 4 readings were refused\. The first: /);
    expect(Object.keys(problem.fields)).toEqual(['1.text', '2.quantity']);
    expect(await kept()).toEqual([]);
    expect(await database.db.$count(ledgerEntries, eq(ledgerEntries.action, 'reading.record'))).toBe(0);
  });

  it('of an empty list, and of too many', async () => {
    expect((await refused(await send([]))).status).toBe(400);
    const many = await refused(await send(Array.from({ length: 201 }, () => second)));
    expect(many.detail).toContain('At most 200 readings');
  });

  it('of a unit that has no run open', async () => {
    const [unit] = await database.db.select().from(units);
    if (unit === undefined) throw new Error('There is no unit.');
    await database.db
      .insert(units)
      .values({ ...unit, id: unit.id + 1, serial: 'H3-0148', pageCode: 'PAGEH30148' });
    const problem = await refused(await send({ ...second, serial: 'H3-0148' }));
    expect(problem).toMatchObject({
      status: 409,
      detail: 'H3-0148 has no run open. Open one at the bench first.',
    });
  });

  it('of a closed run, which stays as it was', async () => {
    await accepted(await send([power, { ...second, text: '38.1 dBc' }]));
    await closeRun({ runId }, bench.ctx);
    const before = await kept();
    const problem = await refused(await send(second));
    expect(problem).toMatchObject({ status: 409 });
    expect(problem.detail).toContain('closed is closed');
    expect(await kept()).toEqual(before);
  });

  it('of another tester’s run', async () => {
    const other = await seedPerson(database.db, { name: 'Ruth Osei', roles: ['tester'] });
    const problem = await refused(await send(second, { as: await accessAs(other) }));
    expect(problem).toMatchObject({
      status: 409,
      detail: 'Ines Aldous has this run. Take it over first.',
      type: 'urn:rigwright:problem:taken',
    });
  });

  it('of what another window has changed meanwhile', async () => {
    await accepted(await send(second));
    const problem = await refused(await send({ ...second, text: '40 dBc', version: 0 }));
    expect(problem).toMatchObject({ status: 409 });
    expect(problem.fields['0.text']).toContain('“51.1 dBc”');
    await accepted(await send({ ...second, text: '51.2 dBc', version: 1 }));
  });

  it('of a token without the scope, and of a person without the role', async () => {
    expect(await refused(await send(second, { as: { ...access, scopes: [] } }))).toMatchObject({
      status: 403,
      detail: expect.stringContaining('has not the scope readings:write') as string,
    });
    const shipper = await seedPerson(database.db, { name: 'Theo', roles: ['shipper'] });
    expect(await refused(await send(second, { as: await accessAs(shipper) }))).toMatchObject({ status: 403 });
    expect(await kept()).toEqual([]);
  });

  it('of a quantity that is computed', async () => {
    await database.db.update(testPlanRevisions).set({ state: 'draft' });
    await database.db
      .update(testPoints)
      .set({ quantityKey: 'efficiency', limitRule: 'fixed' })
      .where(eq(testPoints.quantityKey, 'current_key_down'));
    const problem = await refused(await send({ ...power, quantity: 'efficiency', text: '40 %' }));
    expect(problem.detail).toBe('Efficiency is computed from other readings: send those.');
  });
});

describe('while a run closes', () => {
  it('a reading is either in it or refused: none is lost, and the run is whole', async () => {
    await accepted(
      await send([
        power,
        second,
        { ...second, quantity: 'harmonic_3', text: '61.6 dBc' },
        { ...power, quantity: 'current_key_down', text: '612 mA', path: null },
        { ...power, quantity: 'frequency_error', text: '38 Hz', path: null },
      ]),
    );
    const [closing, ...sent] = await Promise.all([
      closeRun({ runId }, bench.ctx),
      ...Array.from({ length: 6 }, (_, index) =>
        send({ ...second, text: `${String(52 + index)} dBc`, again: true }),
      ),
    ]);
    const taken = sent.filter(({ status }) => status === 200).length;
    expect(sent.every(({ status }) => status === 200 || status === 409)).toBe(true);
    expect(closing.result).toBe('passed');
    const rows = await kept();
    expect(rows.filter(({ quantityKey }) => quantityKey === 'harmonic_2')).toHaveLength(1 + taken);
  });

  it('what was voided is not corrected by what comes after', async () => {
    const [first] = await accepted(await send(second));
    await voidReading(
      { runId, readingId: first?.readingId ?? 0, reason: 'Wrong band' },
      callAs(database.db, bench.tester),
    );
    const [next] = await accepted(await send(second));
    expect(next).toMatchObject({ readingNo: 2, judgement: { n: 1 } });
  });
});
