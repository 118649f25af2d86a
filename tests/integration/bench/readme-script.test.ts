import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import { newAccessToken } from '~/server/auth/access-tokens';
import { tokenHash } from '~/server/auth/tokens';
import { ledgerEntries, readings, sweeps } from '~/server/db/schema';
import { createPath } from '~/server/services/bench/create-path';
import { openRun } from '~/server/services/bench/open-run';
import { createAccessToken } from '~/server/services/people/create-access-token';
import { recordedReadings, recordedSweep } from '~/schemas/bench-wire';
import { root } from '../../../src/server/run/root';
import { buildPathSpec, seedBench } from '../../factories/bench';
import { testDatabase } from '../../setup/database';
import { startWebProcesses, type WebProcess } from '../../setup/web-process';

const database = testDatabase();
const folder = mkdtempSync(join(tmpdir(), 'rigwright-script-'));
let server: WebProcess | undefined;
let token: string;

beforeAll(async () => {
  [server] = await startWebProcesses(1);
}, 600_000);

afterAll(() => server?.stop());

beforeEach(async () => {
  const bench = await seedBench(database.db);
  await createPath({ number: 'T-1', name: 'Tap', spec: buildPathSpec() }, bench.ctx);
  await openRun({ serial: bench.serial }, bench.ctx);
  token = newAccessToken();
  await createAccessToken(
    { name: 'bench PC', scopes: ['readings:write'], days: null, tokenHash: tokenHash(token) },
    bench.ctx,
  );
  writeFileSync(join(folder, 'sweep-20m.csv'), buildSweep());
});

/** A 14.06 MHz carrier with its second and third harmonic 51 and 61 dB down, points 25 kHz apart. */
function buildSweep(): string {
  const rows = ['Frequency (Hz),Level (dBm)'];
  for (let freqHz = 100e3; freqHz <= 80e6; freqHz += 25e3) {
    const order = [1, 2, 3].find((each) => Math.abs(freqHz - each * 14.06e6) <= 12.5e3);
    const noise = -95 + ((freqHz / 25e3) % 7) / 7;
    rows.push(`${freqHz},${order === undefined ? noise : -6 - (order === 1 ? 0 : 31 + 10 * order)}`);
  }
  return rows.join('\n');
}

/** The command of the README that goes to an address, as it stands there. */
function commandTo(address: string): string {
  const readme = readFileSync(join(root, 'README.md'), 'utf8');
  const blocks = [...readme.matchAll(/```sh\n([\s\S]*?)```/g)].map(([, block = '']) => block);
  const found = blocks.filter((block) => block.includes(address));
  expect(found).toHaveLength(1);
  return found[0] ?? '';
}

/** Runs a command of the README in a shell, with the two settings that it names. */
async function run(command: string, bearer = token): Promise<{ code: number | null; answer: unknown }> {
  const child = spawn('bash', ['-c', command], {
    cwd: folder,
    env: { PATH: process.env['PATH'], RIGWRIGHT: server?.url, RIGWRIGHT_TOKEN: bearer },
    stdio: ['ignore', 'pipe', 'ignore'],
  });
  let text = '';
  child.stdout.on('data', (piece: Buffer) => (text += piece.toString()));
  const code = await new Promise<number | null>((resolve) => child.once('close', resolve));
  return { code, answer: JSON.parse(text) };
}

test('the README’s command sends readings into the open run', { timeout: 60_000 }, async () => {
  const { code, answer } = await run(commandTo('/api/bench/readings'));
  expect(answer).not.toHaveProperty('detail');
  expect(code).toBe(0);
  const sent = recordedReadings.parse(answer).readings;
  expect(sent.map(({ quantity, judgement }) => [quantity, judgement.verdict])).toEqual([
    ['rf_power', 'pass'],
    ['harmonic_2', 'pass'],
  ]);
  const rows = await database.db.select().from(readings);
  expect(rows.map(({ source }) => source)).toEqual(['wire', 'wire']);
  const entries = await database.db.select().from(ledgerEntries);
  expect(entries.at(-1)).toMatchObject({
    action: 'reading.send',
    details: { readings: 2, accessTokenId: 1 },
  });
});

test('the README’s command sends a sweep into the open run', { timeout: 60_000 }, async () => {
  const { code, answer } = await run(commandTo('/api/bench/sweeps'));
  expect(answer).not.toHaveProperty('detail');
  expect(code).toBe(0);
  expect(recordedSweep.parse(answer)).toMatchObject({ serial: 'H3-0147', band: '20m', readings: 2 });
  expect(await database.db.$count(sweeps)).toBe(1);
});

test('with a token that is not known they fail, with a problem document', { timeout: 60_000 }, async () => {
  for (const address of ['/api/bench/readings', '/api/bench/sweeps']) {
    const { code, answer } = await run(commandTo(address), 'rw_unknown');
    expect(code).not.toBe(0);
    expect(answer).toMatchObject({ status: 401, type: 'urn:rigwright:problem:unsigned' });
  }
  expect(await database.db.$count(readings)).toBe(0);
});
