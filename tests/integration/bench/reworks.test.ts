import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { POST as findingDoor } from '~/pages/api/units/[serial]/reworks/finding';
import { POST as closingDoor } from '~/pages/api/units/[serial]/reworks/closing';
import { letIn } from '~/server/auth/sessions';
import { ledgerEntries, reworks } from '~/server/db/schema';
import { readLikelyCauses } from '~/server/queries/bench/read-likely-causes';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { closeRework } from '~/server/services/production/close-rework';
import { findCause } from '~/server/services/production/find-cause';
import { seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let bench: SeededBench;
let minute: number;

const good = {
  rf_power: '-6.03 dBm',
  harmonic_2: '51.1 dBc',
  harmonic_3: '61.6 dBc',
  current_key_down: '612 mA',
  frequency_error: '38 Hz',
};
const turns = 'Low-pass coil has a wrong number of turns';

beforeEach(async () => {
  bench = await seedBench(database.db);
  minute = 0;
});

/** The clock goes on by a minute with each call, as on a bench. */
function ctx() {
  minute += 1;
  return { ...bench.ctx, now: new Date(bench.ctx.now.getTime() + minute * 60_000) };
}

async function run(change: Partial<typeof good> = {}): Promise<number> {
  const { runId } = await openRun({ serial: bench.serial }, ctx());
  for (const [key, text] of Object.entries({ ...good, ...change })) {
    await recordReading(
      {
        ...{ runId, text, again: false, confirmed: false, attenuationHeld: false },
        testPointId: bench.pointId(key),
        instrumentRevisionId: bench.instrumentRevisionId,
        pathRevisionId: bench.pathRevisionId,
      },
      ctx(),
    );
  }
  await closeRun({ runId }, ctx());
  return runId;
}

async function mend(foundCause: string | undefined, remedy = 'L7 rewound, one turn less') {
  await closeRework({ serial: bench.serial, remedy, minutes: 20, foundCause }, ctx());
}

async function allReworks() {
  return database.db.select().from(reworks).orderBy(reworks.id);
}

const badHarmonic = { harmonic_2: '38.1 dBc' };
const weak = { rf_power: '-9 dBm' };

describe('a failed run', () => {
  it('ranks the usual suspects where the works has no history', async () => {
    const causes = await readLikelyCauses(database.db, await run(badHarmonic));
    expect(causes[0]).toMatchObject({ cause: turns, counted: null, isUsual: true });
  });

  it('that passed has no causes', async () => {
    expect(await readLikelyCauses(database.db, await run())).toEqual([]);
  });

  it('counts a cause only once the next run has passed', async () => {
    const cause = 'Relay of the filter stuck';
    await run(badHarmonic);
    await mend(cause);
    const second = await run(badHarmonic);
    expect((await readLikelyCauses(database.db, second)).map((each) => each.cause)).not.toContain(cause);
    await mend(turns);
    const third = await run();
    expect((await allReworks()).map((each) => [each.foundCause, each.confirmedByRunId])).toEqual([
      [cause, null],
      [turns, third],
    ]);
    const causes = await readLikelyCauses(database.db, second);
    expect(causes[0]).toMatchObject({
      cause: turns,
      counted: { n: 1, of: 1, nearness: 'band' },
      remedies: ['L7 rewound, one turn less'],
      minutes: 20,
    });
  });

  it('at another point leaves the remedy of the first to be confirmed', async () => {
    await run(badHarmonic);
    await mend(turns);
    await run(weak);
    await mend('Output transistor is weak or damaged', 'Q9 replaced');
    const passed = await run();
    expect((await allReworks()).map(({ confirmedByRunId }) => confirmedByRunId)).toEqual([passed, passed]);
  });

  it('leaves an undecided run between to confirm nothing', async () => {
    await run(badHarmonic);
    await mend(turns);
    await run({ harmonic_2: '47.5 dBc' });
    expect((await allReworks())[0]?.confirmedByRunId).toBeNull();
    const passed = await run();
    expect((await allReworks())[0]?.confirmedByRunId).toBe(passed);
  });
});

describe('what was found behind it', () => {
  beforeEach(async () => {
    await run(badHarmonic);
  });

  it('is written down, corrected, and kept when the rework closes without a word of it', async () => {
    await findCause({ serial: bench.serial, foundCause: 'Relay stuck' }, ctx());
    await findCause({ serial: bench.serial, foundCause: turns }, ctx());
    const [entry] = await database.db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.action, 'rework.find_cause'))
      .orderBy(ledgerEntries.id)
      .offset(1)
      .limit(1);
    expect(entry?.details).toEqual({ cause: { from: 'Relay stuck', to: turns } });
    await mend(undefined);
    expect((await allReworks())[0]).toMatchObject({ foundCause: turns, minutes: 20 });
    await expect(findCause({ serial: bench.serial, foundCause: turns }, ctx())).rejects.toMatchObject({
      code: 'conflict',
    });
  });

  it('is one of the list, or what was typed', async () => {
    const person = await letIn(bench.tester);
    const ask = (door: typeof findingDoor, body: Record<string, unknown>) =>
      callDoor(door, { person, params: { serial: bench.serial }, ...sendJson(body) });
    const nothing = await ask(findingDoor, { foundCause: '', otherCause: ' ' });
    expect((await problemIn(nothing.response))['fields']).toEqual({
      otherCause: 'Choose a cause, or type one.',
    });
    const typed = await ask(findingDoor, { foundCause: turns, otherCause: 'Cracked C41' });
    expect(await typed.response.json()).toMatchObject({ foundCause: 'Cracked C41' });
    const closed = await ask(closingDoor, { foundCause: turns, remedy: 'Rewound', minutes: '12' });
    expect(closed.response.status).toBe(200);
    expect((await allReworks())[0]).toMatchObject({ foundCause: turns, remedy: 'Rewound', minutes: 12 });
  });

  it('is for builders and testers to say', async () => {
    const { response } = await callDoor(findingDoor, {
      params: { serial: bench.serial },
      ...sendJson({ foundCause: turns }),
    });
    expect(response.status).toBe(401);
  });
});
