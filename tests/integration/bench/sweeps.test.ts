import { beforeEach, describe, expect, it } from 'vitest';
import { files, readings, sweeps } from '../../../src/server/db/schema';
import { readStation } from '../../../src/server/queries/bench/read-station';
import { openRun } from '../../../src/server/services/bench/open-run';
import { readSweepIntoRun } from '../../../src/server/services/bench/read-sweep-into-run';
import { buildPlan, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let runId: number;

/** A spectrum of a 14.06 MHz carrier at −6 dBm with its harmonics this far down, points 25 kHz apart. */
function buildSweep(harmonicsDb: number[], highestHz = 80e6): Uint8Array {
  const rows: string[] = ['Frequency (Hz),Level (dBm)'];
  for (let freqHz = 100e3; freqHz <= highestHz; freqHz += 25e3) {
    const order = Math.round(freqHz / 14.06e6);
    const isPeak = order >= 1 && Math.abs(freqHz - order * 14.06e6) <= 12.5e3;
    const down = order === 1 ? 0 : (harmonicsDb[order - 2] ?? 90);
    const noise = -95 + ((freqHz / 25e3) % 7) / 7;
    rows.push(`${freqHz},${isPeak ? Math.max(noise, -6 - down) : noise}`);
  }
  return new TextEncoder().encode(rows.join('\n'));
}

async function load(bytes: Uint8Array, hints = { rbwHz: 30e3, detector: 'positive peak' }) {
  return readSweepIntoRun(
    {
      runId,
      band: '20m',
      bytes,
      name: 'holm3-0147-20m.csv',
      instrumentRevisionId: bench.instrumentRevisionId,
      pathRevisionId: bench.pathRevisionId,
      hints,
    },
    bench.ctx,
  );
}

beforeEach(async () => {
  const on = { band: '20m', freqHz: 14_060_000, lowerLimit: null, upperLimit: null, condition: null };
  bench = await seedBench(database.db, [
    ...buildPlan([{ band: '20m', freqHz: 14_060_000 }]),
    { ...on, quantityKey: 'spurious', limitRule: 'spurious', decision: 'guarded', required: true },
  ]);
  ({ runId } = await openRun({ serial: bench.serial }, bench.ctx));
});

describe('a sweep', () => {
  it('fills the harmonics of its band at the meter, and the strongest other product', async () => {
    const { readings: count } = await load(buildSweep([51.1, 61.6]));
    expect(count).toBe(3);
    const rows = await database.db.select().from(readings);
    const of = (key: string) => rows.find(({ quantityKey }) => quantityKey === key);
    expect(of('harmonic_2')).toMatchObject({ source: 'sweep', enteredUnit: 'dBc', atMost: false });
    expect(of('harmonic_2')?.value).toBeCloseTo(-51.1, 6);
    expect(of('harmonic_3')?.value).toBeCloseTo(-61.6, 6);
    // Nothing else stands over the noise, so no product is stronger than it.
    expect(of('spurious')).toMatchObject({ atMost: true });
    expect(of('spurious')?.value).toBeLessThan(-88);
  });

  it('is shown with its trace, and its file is kept', async () => {
    await load(buildSweep([51.1, 61.6]));
    const station = await readStation(database.db, runId);
    expect(station?.sweeps[0]).toMatchObject({ fileName: 'holm3-0147-20m.csv', band: '20m' });
    expect(Math.max(...(station?.sweeps[0]?.trace ?? []).map(([, dbc]) => dbc))).toBe(0);
    expect(station?.sweeps[0]?.trace.length).toBeLessThanOrEqual(800);
  });

  it('hidden in the noise counts with the noise, as at most', async () => {
    await load(buildSweep([51.1, 99]));
    const station = await readStation(database.db, runId);
    const third = station?.sheet.readings.find(({ quantityKey }) => quantityKey === 'harmonic_3');
    expect(third?.atMost).toBe(true);
  });

  const anyText: unknown = expect.any(String);
  it.each([
    ['that is none', new TextEncoder().encode('Dear works,\nthe rig is fine.\n'), 'file'],
    ['that does not reach the third harmonic', buildSweep([51.1, 61.6], 30e6), 'file'],
  ])('%s stores nothing', async (_name, bytes, field) => {
    await expect(load(bytes)).rejects.toMatchObject({
      code: 'refused',
      fields: { [field]: anyText },
    });
    expect(await database.db.$count(sweeps)).toBe(0);
    expect(await database.db.$count(readings)).toBe(0);
    expect(await database.db.$count(files)).toBe(0);
  });

  it('with an open question is asked about first, and stores nothing', async () => {
    const { instrumentRevisionId, pathRevisionId } = bench;
    const asked = readSweepIntoRun(
      {
        ...{ runId, band: '20m', bytes: buildSweep([51.1, 61.6]), name: 'x.csv', hints: {} },
        ...{ instrumentRevisionId, pathRevisionId },
      },
      bench.ctx,
    );
    const asksForBandwidth: unknown = expect.stringContaining('bandwidth');
    await expect(asked).rejects.toMatchObject({ fields: { hints: asksForBandwidth } });
    expect(await database.db.$count(files)).toBe(0);
  });
});
