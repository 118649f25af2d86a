import { beforeEach, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { POST as sweepsDoor } from '~/pages/api/bench/sweeps';
import { recordedSweep } from '~/schemas/bench-wire';
import type { Access } from '~/server/auth/access-tokens';
import { letIn } from '~/server/auth/sessions';
import { files, ledgerEntries, readings, sweeps } from '~/server/db/schema';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { callDoor, problemIn } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let runId: number;
let access: Access & { ok: true };

beforeEach(async () => {
  bench = await seedBench(database.db);
  ({ runId } = await openRun({ serial: bench.serial }, bench.ctx));
  const person = await letIn(bench.tester);
  if (person === null) throw new Error('The tester is shut out.');
  access = { ok: true, tokenId: 1, scopes: ['readings:write'], person };
});

/** A 14.06 MHz carrier with its second and third harmonic 51 and 61 dB down, points 25 kHz apart. */
function buildSweep(highestHz = 80e6): string {
  const rows = ['Frequency (Hz),Level (dBm)'];
  for (let freqHz = 100e3; freqHz <= highestHz; freqHz += 25e3) {
    const order = [1, 2, 3].find((each) => Math.abs(freqHz - each * 14.06e6) <= 12.5e3);
    rows.push(
      `${freqHz},${order === undefined ? -95 + ((freqHz / 25e3) % 7) / 7 : -6 - (order === 1 ? 0 : 31 + 10 * order)}`,
    );
  }
  return rows.join('\n');
}

async function send(text: string, change: Record<string, string> = {}, scopes = access.scopes) {
  const form = new FormData();
  const fields = {
    ...{ serial: bench.serial, band: '20m', instrument: 'SA-1', path: 'P-1' },
    ...{ rbwKhz: '30', detector: 'positive peak' },
    ...change,
  };
  for (const [name, value] of Object.entries(fields)) form.append(name, value);
  form.append('file', new File([text], 'sweep-20m.csv', { type: 'text/csv' }));
  const { response } = await callDoor(sweepsDoor, {
    ...{ body: form, path: '/api/bench/sweeps', access: { ...access, scopes } },
    ...{ person: access.person, now: bench.ctx.now },
  });
  return response;
}

const problem = z.object({
  status: z.number(),
  detail: z.string(),
  fields: z.record(z.string()).default({}),
});

async function refused(response: Response) {
  const found = problem.parse(await problemIn(response));
  expect(await database.db.$count(sweeps)).toBe(0);
  expect(await database.db.$count(files)).toBe(0);
  return found;
}

describe('a sweep that a script sends', () => {
  it('is read into the open run, and every point of its band comes back judged', async () => {
    const response = await send(buildSweep());
    const body: unknown = await response.json();
    expect(response.status, JSON.stringify(body)).toBe(200);
    const answer = recordedSweep.parse(body);
    expect(answer).toMatchObject({ serial: 'H3-0147', runNo: 1, band: '20m', readings: 2 });
    const second = answer.judgements.find(({ label }) => label === '20 m, 2nd harmonic');
    expect(second).toMatchObject({ n: 1, unit: 'dBc' });
    expect(second?.value).toBeCloseTo(-51, 3);
    const rows = await database.db.select().from(readings);
    expect(rows.map(({ source, quantityKey }) => [source, quantityKey])).toEqual([
      ['sweep', 'harmonic_2'],
      ['sweep', 'harmonic_3'],
    ]);
    const actions = (await database.db.select().from(ledgerEntries)).map(({ action }) => action);
    expect(actions.slice(-2)).toEqual(['sweep.read', 'sweep.send']);
  });

  it.each<[string, Record<string, string>, number, string]>([
    ['an unknown unit', { serial: 'H3-9999' }, 404, 'serial'],
    ['an unknown instrument', { instrument: 'XX' }, 422, 'instrument'],
    ['an unknown path', { path: 'XX' }, 422, 'path'],
    ['an unknown band', { band: '11m' }, 400, 'band'],
    ['a bandwidth of nothing', { rbwKhz: '0' }, 400, 'rbwKhz'],
    ['no answer to what the file leaves open', { detector: '', rbwKhz: '' }, 422, 'hints'],
  ])('is refused for %s', async (_, change, status, field) => {
    const found = await refused(await send(buildSweep(), change));
    expect(found.status).toBe(status);
    expect(Object.keys(found.fields)).toEqual([field]);
  });

  it.each([
    ['is empty', ''],
    ['ends at the second harmonic', buildSweep(29e6)],
    ['is no sweep', '%PDF-1.7 and so on'],
  ])('is refused where the file %s', async (_, text) => {
    expect((await refused(await send(text))).status).toBe(422);
  });

  it('is refused to a token without the scope, and into a closed run', async () => {
    expect((await refused(await send(buildSweep(), {}, []))).status).toBe(403);
    await recordReading(
      {
        ...{ runId, testPointId: bench.pointId('rf_power'), text: '0.1 W', again: false, confirmed: true },
        ...{ attenuationHeld: false, instrumentRevisionId: bench.instrumentRevisionId, pathRevisionId: null },
      },
      bench.ctx,
    );
    await closeRun({ runId }, bench.ctx);
    const found = await refused(await send(buildSweep()));
    expect(found).toMatchObject({ status: 409 });
    expect(found.detail).toContain('closed is closed');
  });
});
