import { and, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { buildSteps, ledgerEntries, ledgerSubjects, stepRecords, units } from '~/server/db/schema';
import { getUnitHistory } from '~/server/queries/production/get-unit-history';
import { closeRework } from '~/server/services/production/close-rework';
import { endHold } from '~/server/services/production/end-hold';
import { openRework } from '~/server/services/production/open-rework';
import { pickForUnit } from '~/server/services/production/pick-for-unit';
import { placeHold } from '~/server/services/production/place-hold';
import { tickStep } from '~/server/services/production/tick-step';
import { undoPick } from '~/server/services/production/undo-pick';
import type { CallContext } from '~/server/write';
import { seedWorks } from '../../factories/catalog';
import { seedFloor, seedUnit } from '../../factories/floor';
import type { SeededFloor } from '../../factories/floor';
import { seedBuilder } from '../../factories/stores';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let ctx: CallContext;
let floor: SeededFloor;

beforeEach(async () => {
  await seedWorks(database.db);
  ctx = await seedBuilder(database.db);
  floor = await seedFloor(ctx);
  await seedUnit(database.db, floor, 'H3-0001', { stage: 'boards' });
});

async function stepId(title: string): Promise<number> {
  const [row] = await database.db
    .select({ id: buildSteps.id })
    .from(buildSteps)
    .where(eq(buildSteps.title, title));
  if (row === undefined) throw new Error(`There is no step ${title}.`);
  return row.id;
}

const tick = async (title: string, rest: { entry?: string; minutes?: number } = {}) =>
  tickStep({ serial: 'H3-0001', stepId: await stepId(title), ...rest }, ctx);

const stage = async () => (await getUnitHistory(database.db, 'H3-0001'))?.unit.stage;

describe('build steps', () => {
  it('take the unit from stub to stub', async () => {
    expect(await tick('Fit the coils', { minutes: 38 })).toMatchObject({ stage: 'boards' });
    expect(await tick('Fit the crystals')).toMatchObject({ stage: 'align' });
    expect(await tick('Set the quiescent current', { entry: '61' })).toMatchObject({ stage: 'final_test' });
    expect(await stage()).toBe('final_test');
    const found = await getUnitHistory(database.db, 'H3-0001');
    expect(found?.steps.at(-1)?.records).toMatchObject([{ entry: '61 mA', byName: 'Ruth Osei' }]);
  });

  it('leave out what the options leave out', async () => {
    await database.db.update(units).set({ options: ['band.40m', 'band.30m', 'band.20m'] });
    expect(await tick('Fit the coils')).toMatchObject({ stage: 'align' });
    await expect(tick('Fit the crystals')).rejects.toMatchObject({ code: 'not_found' });
  });

  it('ticked twice are told, not doubled', async () => {
    await tick('Fit the coils');
    await expect(tick('Fit the coils')).rejects.toThrow(
      '“Fit the coils” was ticked already by Ruth Osei, 1 March 2027, 10:00',
    );
    expect(await database.db.$count(stepRecords)).toBe(1);
  });

  it('ticked by two people at once are one', async () => {
    const other = await seedBuilder(database.db, { name: 'Ida Aldous', email: 'ida@thistledown.example' });
    const id = await stepId('Fit the coils');
    const tries = await Promise.allSettled(
      [ctx, other].map((who) => tickStep({ serial: 'H3-0001', stepId: id }, who)),
    );
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await database.db.$count(stepRecords)).toBe(1);
  });

  it('wait for their stage', async () => {
    await expect(tick('Set the quiescent current', { entry: '61' })).rejects.toThrow(
      'H3-0001: Align waits: the unit is at boards.',
    );
  });

  it('hold an entry to its limits', async () => {
    await tick('Fit the coils');
    await tick('Fit the crystals');
    await expect(tick('Set the quiescent current', { entry: '71' })).rejects.toMatchObject({
      code: 'refused',
      fields: { entry: '71 mA is over 65 mA. Put it right before the step is done.' },
    });
    await expect(tick('Set the quiescent current')).rejects.toThrow('Enter the quiescent current.');
    expect(await stage()).toBe('align');
  });

  it('rule 9: leave who, when and from what to what in the ledger of changes', async () => {
    await tick('Fit the coils');
    await tick('Fit the crystals', { minutes: 5 });
    const rows = await database.db
      .select({
        action: ledgerEntries.action,
        details: ledgerEntries.details,
        user: ledgerEntries.actorUserId,
      })
      .from(ledgerSubjects)
      .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerSubjects.ledgerEntryId))
      .where(and(eq(ledgerSubjects.subjectType, 'unit'), eq(ledgerEntries.action, 'step.tick')))
      .orderBy(ledgerEntries.id);
    expect(rows).toHaveLength(2);
    expect(rows[1]?.details).toMatchObject({
      step: 'Fit the crystals',
      minutes: 5,
      stage: { from: 'boards', to: 'align' },
    });
    expect(rows[1]?.user).not.toBeNull();
  });
});

describe('holds', () => {
  it('stop the work until they end, with a reason each way', async () => {
    const { holdId } = await placeHold(
      { subject: { type: 'unit', number: 'H3-0001' }, reason: 'scratched' },
      ctx,
    );
    await expect(tick('Fit the coils')).rejects.toThrow('H3-0001: One hold is on it.');
    expect((await getUnitHistory(database.db, 'H3-0001'))?.unit.holds).toMatchObject([
      { id: holdId, owner: 'Ruth Osei' },
    ]);
    await endHold({ holdId, reason: 'panel exchanged' }, ctx);
    await tick('Fit the coils');
    await expect(endHold({ holdId, reason: 'again' }, ctx)).rejects.toMatchObject({ code: 'conflict' });
  });

  it('stand only on what is there', async () => {
    await expect(placeHold({ subject: { type: 'order', number: 77 }, reason: 'x' }, ctx)).rejects.toThrow(
      'There is no order 77.',
    );
  });
});

describe('rework', () => {
  const at = (to: 'pack' | 'final_test' | 'kit' | 'gone') => database.db.update(units).set({ stage: to });

  it('returns a unit that had passed to its final test, with cause, remedy and minutes', async () => {
    await at('pack');
    await openRework({ serial: 'H3-0001', cause: '20 m, 2nd harmonic too high' }, ctx);
    expect(await stage()).toBe('final_test');
    expect(
      await closeRework({ serial: 'H3-0001', remedy: 'L7 rewound, 13 to 12 turns', minutes: 35 }, ctx),
    ).toMatchObject({
      stage: 'final_test',
    });
    expect((await getUnitHistory(database.db, 'H3-0001'))?.reworks).toMatchObject([
      {
        cause: '20 m, 2nd harmonic too high',
        remedy: 'L7 rewound, 13 to 12 turns',
        minutes: 35,
        closedBy: 'Ruth Osei',
      },
    ]);
  });

  it('is open once', async () => {
    await at('final_test');
    const tries = await Promise.allSettled(
      [1, 2].map(() => openRework({ serial: 'H3-0001', cause: 'hum' }, ctx)),
    );
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    await closeRework({ serial: 'H3-0001', remedy: 'earth wire resoldered' }, ctx);
    await expect(closeRework({ serial: 'H3-0001', remedy: 'again' }, ctx)).rejects.toThrow(
      'is not in rework',
    );
  });

  it.each(['kit', 'gone'] as const)('is not for a unit at %s', async (where) => {
    await at(where);
    await expect(openRework({ serial: 'H3-0001', cause: 'hum' }, ctx)).rejects.toMatchObject({
      code: 'conflict',
    });
  });

  it('lets a step be done again, as its next round', async () => {
    await tick('Fit the coils');
    await tick('Fit the crystals');
    await at('final_test');
    await expect(tick('Fit the coils')).rejects.toThrow('ticked already');
    await openRework({ serial: 'H3-0001', cause: 'L7 has a turn too many' }, ctx);
    expect(await tick('Fit the coils')).toMatchObject({ round: 2, stage: 'final_test' });
    await expect(tick('Fit the coils')).rejects.toThrow('ticked already');
  });

  it('lets a part be exchanged, and is not closed while its place is empty', async () => {
    await database.db.update(units).set({ stage: 'kit' });
    const { pickId } = await pickForUnit({ serial: 'H3-0001', lot: floor.lots.transistors }, ctx);
    await pickForUnit({ serial: 'H3-0001', lot: floor.lots.crystals }, ctx);
    await at('final_test');
    await openRework({ serial: 'H3-0001', cause: 'Q5 has no gain' }, ctx);
    await undoPick({ serial: 'H3-0001', pickId }, ctx);
    await expect(closeRework({ serial: 'H3-0001', remedy: 'Q5, Q6 exchanged' }, ctx)).rejects.toThrow(
      'H3-0001 lacks Q-RD16 (2), which was put back. Pick it first.',
    );
    await pickForUnit({ serial: 'H3-0001', lot: floor.lots.transistors }, ctx);
    await closeRework({ serial: 'H3-0001', remedy: 'Q5, Q6 exchanged' }, ctx);
  });
});
