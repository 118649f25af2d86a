import { and, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import {
  ledgerEntries,
  readings,
  reworks,
  runPoints,
  stepRecords,
  testRuns,
  units,
  works,
} from '../../../src/server/db/schema';
import { DomainError } from '../../../src/server/errors';
import { readRunSheet } from '../../../src/server/queries/bench/read-run-sheet';
import { closeRun } from '../../../src/server/services/bench/close-run';
import { openRun } from '../../../src/server/services/bench/open-run';
import { recordReading } from '../../../src/server/services/bench/record-reading';
import { setConditions } from '../../../src/server/services/bench/set-conditions';
import { takeOverRun } from '../../../src/server/services/bench/take-over-run';
import { voidReading } from '../../../src/server/services/bench/void-reading';
import { closeRework } from '../../../src/server/services/production/close-rework';
import { openRework } from '../../../src/server/services/production/open-rework';
import { callAs, seedBench } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import type { SeededBench } from '../../factories/bench';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let runId: number;

/** 2.61 W at the unit through 40.2 dB. */
const power = '-6.03 dBm';
const good = {
  rf_power: power,
  harmonic_2: '51.1',
  harmonic_3: '61.6',
  current_key_down: '612 mA',
  frequency_error: '38',
};

async function type(
  quantityKey: string,
  text: string,
  more: Partial<Parameters<typeof recordReading>[0]> = {},
) {
  return recordReading(
    {
      runId,
      testPointId: bench.pointId(quantityKey),
      text,
      again: false,
      confirmed: false,
      attenuationHeld: false,
      instrumentRevisionId: bench.instrumentRevisionId,
      pathRevisionId: bench.pathRevisionId,
      ...more,
    },
    bench.ctx,
  );
}

async function fill(change: Partial<typeof good> = {}) {
  for (const [key, text] of Object.entries({ ...good, ...change })) await type(key, text);
}

async function refusal(work: Promise<unknown>): Promise<DomainError> {
  const error: unknown = await work.then(
    () => undefined,
    (reason: unknown) => reason,
  );
  if (!(error instanceof DomainError)) throw new Error('It was not refused.', { cause: error });
  return error;
}

async function unitRow() {
  const [row] = await database.db.select().from(units).where(eq(units.serial, bench.serial));
  if (row === undefined) throw new Error('The unit is gone.');
  return row;
}

async function pointRow(quantityKey: string) {
  const [row] = await database.db
    .select()
    .from(runPoints)
    .where(and(eq(runPoints.testRunId, runId), eq(runPoints.testPointId, bench.pointId(quantityKey))));
  return row;
}

beforeEach(async () => {
  bench = await seedBench(database.db);
  ({ runId } = await openRun({ serial: 'h3-o147' }, bench.ctx));
});

describe('opening a run', () => {
  it('is refused while one is open, and names it all', async () => {
    const error = await refusal(openRun({ serial: bench.serial }, bench.ctx));
    expect(error.code).toBe('conflict');
    expect(error.message).toBe('H3-0147: A run is open already.');
  });

  it('is refused to the builder where the works asks for two pairs of hands', async () => {
    await fill();
    await closeRun({ runId }, bench.ctx);
    await database.db.update(works).set({ testerIsNotBuilder: true });
    const { id: unitId } = await unitRow();
    await database.db.transaction(async (tx) => {
      await tx.execute('SET FOREIGN_KEY_CHECKS = 0');
      await tx
        .insert(stepRecords)
        .values({ unitId, buildStepId: 1, doneAt: new Date(), byUserId: bench.tester });
      await tx.execute('SET FOREIGN_KEY_CHECKS = 1');
    });
    expect((await refusal(openRun({ serial: bench.serial }, bench.ctx))).code).toBe('forbidden');
    const other = callAs(database.db, bench.owner);
    expect((await openRun({ serial: bench.serial }, other)).runNo).toBe(2);
  });

  it('makes exactly one run of two requests at once', async () => {
    await fill();
    await closeRun({ runId }, bench.ctx);
    const both = await Promise.allSettled([
      openRun({ serial: bench.serial }, bench.ctx),
      openRun({ serial: bench.serial }, bench.ctx),
    ]);
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });
});

describe('a reading', () => {
  it('is kept as entered, at the meter, in SI units', async () => {
    await type('current_key_down', '0,612 A');
    const [row] = await database.db.select().from(readings);
    expect(row).toMatchObject({ enteredText: '0,612 A', enteredUnit: 'A', value: 0.612, source: 'typed' });
  });

  it('is corrected by retyping, with both values in the ledger of changes', async () => {
    const first = await type('harmonic_2', '15.1');
    const second = await type('harmonic_2', '51.1', { version: first.version });
    expect(second).toEqual({ readingId: first.readingId, readingNo: 1, version: 2 });
    const [entry] = await database.db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.action, 'reading.correct'));
    expect(entry?.details).toMatchObject({
      from: { text: '15.1', unit: 'dBc', value: -15.1 },
      to: { text: '51.1', unit: 'dBc', value: -51.1 },
    });
  });

  it('read again is added, and the mean of both decides', async () => {
    await type('rf_power', power);
    await type('harmonic_2', '51.0');
    await type('harmonic_2', '52.0', { again: true });
    await type('harmonic_3', '61.6');
    await type('current_key_down', '612 mA');
    await type('frequency_error', '38');
    await closeRun({ runId }, bench.ctx);
    expect(await pointRow('harmonic_2')).toMatchObject({ readingCount: 2, verdict: 'pass' });
    expect((await pointRow('harmonic_2'))?.value).toBeCloseTo(-51.5, 9);
  });

  it('that cannot be read is refused at its field, and nothing is stored', async () => {
    const error = await refusal(type('harmonic_2', '3 W'));
    expect(error.code).toBe('refused');
    expect(error.fields['text']).toContain('does not fit 2nd harmonic');
    expect(await database.db.$count(readings)).toBe(0);
  });

  it('that makes no sense is asked about, and taken once confirmed', async () => {
    const error = await refusal(type('rf_power', '25 dBm'));
    expect(error.fields['confirmed']).toContain('far above the 5.00 W of this rig');
    await type('rf_power', '25 dBm', { confirmed: true });
    expect(await database.db.$count(readings)).toBe(1);
  });

  it('in dBm of a product needs the carrier read with the same instrument and path', async () => {
    expect((await refusal(type('harmonic_2', '-57.1 dBm'))).message).toContain('Enter the power');
    await type('rf_power', power);
    await type('harmonic_2', '-57.1 dBm');
    const sheet = await readRunSheet(database.db, runId);
    const product = sheet.readings.find(({ quantityKey }) => quantityKey === 'harmonic_2');
    expect(product?.value).toBeCloseTo(-51.07, 9);
    expect((await refusal(type('harmonic_3', '-60 dBm', { pathRevisionId: null }))).code).toBe('refused');
  });

  it('of another window is not overwritten: the later one is told', async () => {
    await type('harmonic_2', '51.1', { version: 0 });
    const error = await refusal(type('harmonic_2', '48', { version: 0 }));
    expect(error.code).toBe('conflict');
    expect(error.message).toContain('“51.1”');
    const [row] = await database.db.select().from(readings);
    expect(row?.enteredText).toBe('51.1');
  });

  it('is left out only with a cause, and never deleted', async () => {
    await fill({ harmonic_2: '20' });
    const [row] = await database.db
      .select()
      .from(readings)
      .where(eq(readings.testPointId, bench.pointId('harmonic_2')));
    const readingId = row?.id ?? 0;
    await voidReading({ runId, readingId, reason: 'Wrong band' }, bench.ctx);
    expect((await refusal(closeRun({ runId }, bench.ctx))).message).toContain('2nd harmonic has no reading');
    await type('harmonic_2', '51.1');
    expect((await closeRun({ runId }, bench.ctx)).result).toBe('passed');
    await expect(database.db.delete(readings)).rejects.toThrow();
  });

  it('is taken only from the tester who has the run, who changes in the open', async () => {
    const other = await seedPerson(database.db, { name: 'Ruth Osei', roles: ['tester'] });
    const theirs = callAs(database.db, other);
    const error = await refusal(
      setConditions({ runId, supplyV: 13.8, ambientC: 21, firmwareVersion: null, alignment: {} }, theirs),
    );
    expect(error.code).toBe('taken');
    expect(error.message).toBe('Ines Aldous has this run. Take it over first.');
    await takeOverRun({ runId }, theirs);
    expect((await refusal(type('harmonic_2', '51'))).code).toBe('taken');
    const [entry] = await database.db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.action, 'run.take_over'));
    expect(entry?.details).toEqual({ fromUserId: bench.tester, toUserId: other });
  });
});

describe('closing', () => {
  it('a passed run keeps every verdict with limit, uncertainty and rule, and sends the unit on', async () => {
    await setConditions(
      { runId, supplyV: 13.8, ambientC: 21, firmwareVersion: '1.4.2', alignment: { BFO: '+12 Hz' } },
      bench.ctx,
    );
    await fill();
    expect(await closeRun({ runId }, bench.ctx)).toMatchObject({ result: 'passed', runNo: 1 });
    expect(await unitRow()).toMatchObject({
      stage: 'pack',
      firmwareVersion: '1.4.2',
      alignment: { BFO: '+12 Hz' },
    });
    const kept = await pointRow('harmonic_2');
    // No buyer, so the strictest: ITU-R SM.329 category A, 43 + 10·lg(2.61 W) = 47.2 dB (2.6122 W by −6.03 dBm + 40.2 dB).
    expect(kept?.upperLimit).toBeCloseTo(-(43 + 10 * Math.log10(10 ** ((-6.03 + 40.2 - 30) / 10))), 6);
    expect(kept).toMatchObject({ verdict: 'pass', ruleKey: 'itu_category_a', coverageFactor: 2 });
    expect(kept?.expandedUncertainty).toBeGreaterThan(0.5);
    expect((await pointRow('rf_power'))?.ruleText).toBe('Fixed by the test plan, revision C');
    expect(await database.db.$count(runPoints)).toBe(5);
  });

  it('is refused while a required point has no reading', async () => {
    await type('rf_power', power);
    const error = await refusal(closeRun({ runId }, bench.ctx));
    expect(error.code).toBe('conflict');
    expect(error.message).toContain('20 m, 2nd harmonic has no reading.');
    expect(await database.db.$count(runPoints)).toBe(0);
  });

  it('a failed run stops early, opens rework with its cause in words, and the next run follows it', async () => {
    await type('rf_power', power);
    await type('harmonic_2', '38.1');
    expect(await closeRun({ runId }, bench.ctx)).toMatchObject({ result: 'failed' });
    const [run] = await database.db.select().from(testRuns);
    expect(run).toMatchObject({ state: 'closed', stoppedEarly: true });
    const [rework] = await database.db.select().from(reworks);
    expect(rework).toMatchObject({ testRunId: runId, closedAt: null });
    expect(rework?.cause).toBe('Run 1: 20 m, 2nd harmonic, 9.1 dB over the limit');
    expect((await refusal(openRun({ serial: bench.serial }, bench.ctx))).message).toContain('in rework');
    await closeRework({ serial: bench.serial, remedy: 'L7 rewound one turn' }, bench.ctx);
    const second = await openRun({ serial: bench.serial }, bench.ctx);
    expect(second.runNo).toBe(2);
    runId = second.runId;
    await fill();
    expect((await closeRun({ runId }, bench.ctx)).result).toBe('passed');
    expect((await unitRow()).stage).toBe('pack');
  });

  it('an undecided run releases nothing', async () => {
    await fill({ harmonic_2: '47.5' });
    expect((await closeRun({ runId }, bench.ctx)).result).toBe('undecided');
    expect((await unitRow()).stage).toBe('final_test');
    expect(await database.db.$count(reworks)).toBe(0);
  });

  it('computes the verdict and lets nobody choose it', async () => {
    await fill({ harmonic_2: '38.1' });
    const chosen = { runId, result: 'passed', verdict: 'pass' };
    expect((await closeRun(chosen, bench.ctx)).result).toBe('failed');
    expect((await pointRow('harmonic_2'))?.verdict).toBe('fail');
  });

  it('cannot pass a unit that went into rework meanwhile', async () => {
    await fill();
    await openRework({ serial: bench.serial, cause: 'A knob came off' }, bench.ctx);
    expect((await refusal(closeRun({ runId }, bench.ctx))).message).toContain('went into rework');
  });

  it('twice at once closes once, and the other is told', async () => {
    await fill();
    const both = await Promise.allSettled([closeRun({ runId }, bench.ctx), closeRun({ runId }, bench.ctx)]);
    const refused = both.find((each) => each.status === 'rejected');
    expect(both.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(refused?.reason).toMatchObject({ code: 'conflict' });
    expect(await database.db.$count(runPoints)).toBe(5);
    expect(await database.db.$count(ledgerEntries, eq(ledgerEntries.action, 'run.close'))).toBe(1);
  });
});

describe('rule 6: a closed run does not change', () => {
  beforeEach(async () => {
    await fill();
    await closeRun({ runId }, bench.ctx);
  });

  it('through the services', async () => {
    const [row] = await database.db.select().from(readings).limit(1);
    const tries = [
      () => type('harmonic_2', '60'),
      () => type('harmonic_2', '60', { again: true }),
      () => voidReading({ runId, readingId: row?.id ?? 0, reason: 'Too low' }, bench.ctx),
      () =>
        setConditions({ runId, supplyV: 12, ambientC: 20, firmwareVersion: null, alignment: {} }, bench.ctx),
      () => takeOverRun({ runId }, callAs(database.db, bench.owner)),
      () => closeRun({ runId }, bench.ctx),
    ];
    for (const attempt of tries) expect((await refusal(attempt())).message).toContain('closed is closed');
  });

  it('nor past them, in the database', async () => {
    const reading = {
      testRunId: runId,
      testPointId: bench.pointId('harmonic_2'),
      readingNo: 9,
      quantityKey: 'harmonic_2',
      enteredText: '60',
      enteredUnit: 'dBc',
      value: -60,
      source: 'typed' as const,
      at: new Date(),
    };
    const { db } = database;
    const told = async (work: Promise<unknown>) =>
      work.then(
        () => 'it was done',
        (error: unknown) => String(error instanceof Error ? (error.cause ?? error) : error),
      );
    expect(await told(db.insert(readings).values(reading))).toContain('a closed run takes no reading');
    expect(await told(db.update(readings).set({ value: -60 }))).toContain('of a closed run does not change');
    expect(await told(db.update(testRuns).set({ result: 'failed' }))).toContain(
      'a closed run does not change',
    );
    expect(await told(db.update(runPoints).set({ verdict: 'fail' }))).toContain('does not change');
    expect(await told(db.delete(runPoints))).toContain('never deleted');
    expect(await told(db.delete(testRuns))).toContain('never deleted');
  });
});
