import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import { lots, picks, storeEntries, units } from '~/server/db/schema';
import { getKitPage } from '~/server/queries/production/get-kit-page';
import { getUnitHistory } from '~/server/queries/production/get-unit-history';
import { getLot } from '~/server/queries/stores/get-lot';
import { finishKit } from '~/server/services/production/finish-kit';
import { issueToBatch } from '~/server/services/production/issue-to-batch';
import { pickForUnit } from '~/server/services/production/pick-for-unit';
import { placeHold } from '~/server/services/production/place-hold';
import { undoPick } from '~/server/services/production/undo-pick';
import { receiveLot } from '~/server/services/stores/receive-lot';
import { reverseEntry } from '~/server/services/stores/reverse-entry';
import { setLotState } from '~/server/services/stores/set-lot-state';
import type { CallContext } from '~/server/write';
import { seedWorks } from '../../factories/catalog';
import { seedFloor, seedUnit } from '../../factories/floor';
import type { SeededFloor } from '../../factories/floor';
import { buildReceipt, seedBuilder, seedLot } from '../../factories/stores';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let ctx: CallContext;
let floor: SeededFloor;

beforeEach(async () => {
  await seedWorks(database.db);
  ctx = await seedBuilder(database.db);
  floor = await seedFloor(ctx);
  await seedUnit(database.db, floor, 'H3-0001');
});

async function onHand(lot: string): Promise<number> {
  const [row] = await database.db.select({ onHand: lots.onHand }).from(lots).where(eq(lots.number, lot));
  return row?.onHand ?? -1;
}

const pick = (serial: string, lot: string, rest: { quantity?: number; alternateReason?: string } = {}) =>
  pickForUnit({ serial, lot, ...rest }, ctx);

describe('picking', () => {
  it('takes what the line lacks from the lot that was scanned, and names the places', async () => {
    const picked = await pick('h3-0001', ` ${floor.lots.transistors.toLowerCase()} `);
    expect(picked).toMatchObject({ partNumber: 'Q-RD16', quantity: 2, designators: ['Q5', 'Q6'] });
    expect(await onHand(floor.lots.transistors)).toBe(3);
  });

  it('takes a part of a line, and the rest from another lot', async () => {
    const other = (await receiveLot(buildReceipt({ part: 'Q-RD16', quantity: 9 }), ctx)).number;
    expect(await pick('H3-0001', floor.lots.transistors, { quantity: 1 })).toMatchObject({
      designators: ['Q5'],
    });
    expect(await pick('H3-0001', other)).toMatchObject({ quantity: 1, designators: ['Q6'] });
  });

  it('takes what a lot has, where that is less than the line wants', async () => {
    const last = (await receiveLot(buildReceipt({ part: 'Q-RD16', quantity: 1 }), ctx)).number;
    expect(await pick('H3-0001', last)).toMatchObject({ quantity: 1, designators: ['Q5'] });
  });

  it.each([
    {
      what: 'a lot that is not there',
      lot: 'L-999',
      says: 'There is no lot L-999. Scan the label again, or look the part up in the stores.',
      code: 'not_found',
    },
    {
      what: 'a part that is not in the kit',
      lot: 'wrong',
      says: /^Lot L-\d+ is D-1N, which is not in the kit/,
      code: 'refused',
    },
    {
      what: 'more than the line wants',
      lot: 'transistors',
      quantity: 3,
      says: 'The kit lacks 2 of Q-RD16, not 3.',
      code: 'refused',
    },
    {
      what: 'more than the lot has',
      lot: 'crystals',
      quantity: 41,
      says: /has 40, and 41 are wanted/,
      code: 'conflict',
    },
  ])('refuses $what', async ({ lot, quantity, says, code }) => {
    const wrong = await seedLot(ctx, { number: 'D-1N', trace: 'each' });
    const numbers = new Map<string, string>(Object.entries({ ...floor.lots, wrong }));
    const tried = pick('H3-0001', numbers.get(lot) ?? lot, quantity === undefined ? {} : { quantity });
    await expect(tried).rejects.toThrow(says);
    await expect(tried).rejects.toMatchObject({ code });
    expect(await database.db.$count(picks)).toBe(0);
  });

  it('refuses a part once its line is complete', async () => {
    await pick('H3-0001', floor.lots.transistors);
    await expect(pick('H3-0001', floor.lots.transistors)).rejects.toThrow('All of Q-RD16 is picked already');
  });

  it('refuses a part that the options leave out', async () => {
    await seedUnit(database.db, floor, 'H3-0002', { options: ['band.40m', 'band.30m', 'band.20m'] });
    await expect(pick('H3-0002', floor.lots.crystals)).rejects.toThrow('not in the kit of H3-0002');
  });

  it.each(['waiting', 'barred'] as const)('refuses a lot that is %s', async (state) => {
    await setLotState({ lot: floor.lots.crystals, state, reason: 'drifts' }, ctx);
    await expect(pick('H3-0001', floor.lots.crystals)).rejects.toMatchObject({ code: 'conflict' });
    expect(await onHand(floor.lots.crystals)).toBe(40);
  });

  it('takes an approved alternate only with a reason', async () => {
    await expect(pick('H3-0001', floor.lots.alternates)).rejects.toMatchObject({
      code: 'refused',
      fields: {
        alternateReason: 'Q-RD15 is approved in place of Q-RD16. Say why it is taken, and pick again.',
      },
    });
    await pick('H3-0001', floor.lots.alternates, { quantity: 1, alternateReason: 'RD16 is late' });
    const page = await getKitPage(database.db, 'H3-0001');
    const line = page?.lines.find(({ part }) => part.partNumber === 'Q-RD16');
    expect(line?.picks).toMatchObject([{ partNumber: 'Q-RD15', alternateReason: 'RD16 is late' }]);
    expect(line?.missing).toBe(1);
  });

  it('stops at a hold on the unit, its batch or the lot', async () => {
    await placeHold({ subject: { type: 'lot', number: floor.lots.crystals }, reason: 'being measured' }, ctx);
    await expect(pick('H3-0001', floor.lots.crystals)).rejects.toThrow('is on hold: being measured');
    await placeHold({ subject: { type: 'batch', number: 12 }, reason: 'board respin' }, ctx);
    await expect(pick('H3-0001', floor.lots.transistors)).rejects.toThrow('H3-0001: One hold is on it.');
  });

  it('acts once for one key, however often it is sent', async () => {
    const idempotency = { actor: 'user:1', route: 'POST /x', key: 'scan-1', requestHash: 'same', steps: 0 };
    const send = () =>
      pickForUnit(
        { serial: 'H3-0001', lot: floor.lots.transistors, quantity: 1 },
        { ...ctx, idempotency: { ...idempotency } },
      );
    const [first, second] = [await send(), await send()];
    expect(second).toEqual(first);
    expect(await onHand(floor.lots.transistors)).toBe(4);
  });

  it('two people picking the last of a lot at once: one gets it, nothing falls below zero', async () => {
    const last = (await receiveLot(buildReceipt({ part: 'Q-RD16', quantity: 2 }), ctx)).number;
    await seedUnit(database.db, floor, 'H3-0002');
    const other = await seedBuilder(database.db, { name: 'Ida Aldous', email: 'ida@thistledown.example' });
    const tries = await Promise.allSettled([
      pickForUnit({ serial: 'H3-0001', lot: last, quantity: 2 }, ctx),
      pickForUnit({ serial: 'H3-0002', lot: last, quantity: 2 }, other),
    ]);
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    const refused = tries.find((one) => one.status === 'rejected');
    expect(refused?.reason).toMatchObject({ code: 'conflict' });
    expect(await onHand(last)).toBe(0);
    expect(await database.db.$count(picks)).toBe(1);
  });

  it('two scans for the same unit at once do not overfill its line', async () => {
    const scans = await Promise.allSettled(
      [1, 2, 3].map(() => pickForUnit({ serial: 'H3-0001', lot: floor.lots.transistors, quantity: 1 }, ctx)),
    );
    expect(scans.filter(({ status }) => status === 'fulfilled')).toHaveLength(2);
    expect(await onHand(floor.lots.transistors)).toBe(3);
  });
});

describe('undoing a pick', () => {
  it('reverses its entry and keeps both', async () => {
    const { pickId } = await pick('H3-0001', floor.lots.transistors);
    expect(await undoPick({ serial: 'H3-0001', pickId }, ctx)).toMatchObject({ quantity: 2 });
    expect(await onHand(floor.lots.transistors)).toBe(5);
    const found = await getLot(database.db, floor.lots.transistors);
    expect(found?.entries.map(({ kind, quantity }) => [kind, quantity])).toEqual([
      ['reversal', 2],
      ['pick', -2],
      ['receipt', 5],
    ]);
    expect(found?.units).toEqual([]);
    expect(await pick('H3-0001', floor.lots.transistors)).toMatchObject({ designators: ['Q5', 'Q6'] });
  });

  it('happens once', async () => {
    const { pickId } = await pick('H3-0001', floor.lots.transistors);
    const tries = await Promise.allSettled([1, 2].map(() => undoPick({ serial: 'H3-0001', pickId }, ctx)));
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await onHand(floor.lots.transistors)).toBe(5);
  });

  it('is of the unit that was named', async () => {
    const { pickId } = await pick('H3-0001', floor.lots.transistors);
    await seedUnit(database.db, floor, 'H3-0002');
    await expect(undoPick({ serial: 'H3-0002', pickId }, ctx)).rejects.toMatchObject({ code: 'not_found' });
  });

  it('goes through the lot page too, by the reversal of its entry', async () => {
    await pick('H3-0001', floor.lots.transistors);
    const found = await getLot(database.db, floor.lots.transistors);
    const entryId = found?.entries.find(({ kind }) => kind === 'pick')?.id ?? 0;
    await reverseEntry({ lot: floor.lots.transistors, entryId, reason: 'wrong bag' }, ctx);
    const page = await getKitPage(database.db, 'H3-0001');
    expect(page?.lines.find(({ part }) => part.partNumber === 'Q-RD16')).toMatchObject({
      picked: 0,
      missing: 2,
    });
  });
});

describe('issuing to a batch', () => {
  it('takes what its units need with the scrap allowance, oldest lot first, in one step', async () => {
    await seedUnit(database.db, floor, 'H3-0002');
    const later = (
      await receiveLot(buildReceipt({ quantity: 500 }), { ...ctx, now: new Date('2027-03-02T09:00:00Z') })
    ).number;
    await setLotState({ lot: floor.lots.resistors, state: 'barred', reason: 'mixed up' }, ctx);
    await setLotState({ lot: floor.lots.resistors, state: 'usable' }, ctx);
    // 2 units of 10 with 2.5 %: 20.5, so 21.
    expect(await issueToBatch({ batchNumber: 12 }, ctx)).toEqual({
      batchNumber: 12,
      partCount: 1,
      quantity: 21,
      shortages: [],
    });
    expect([await onHand(floor.lots.resistors), await onHand(later)]).toEqual([179, 500]);
    await expect(issueToBatch({ batchNumber: 12 }, ctx)).rejects.toThrow('has been issued');
  });

  it('goes on to the next lot, and tops up for units that came later', async () => {
    const later = (await receiveLot(buildReceipt({ quantity: 500 }), ctx)).number;
    for (let n = 2; n <= 20; n += 1) await seedUnit(database.db, floor, `H3-00${n}`);
    await issueToBatch({ batchNumber: 12 }, ctx);
    expect([await onHand(floor.lots.resistors), await onHand(later)]).toEqual([0, 495]);
    await seedUnit(database.db, floor, 'H3-0021');
    // 21 × 10 with 2.5 % is 215.25, so 216, of which 205 are there.
    expect(await issueToBatch({ batchNumber: 12 }, ctx)).toMatchObject({ quantity: 11 });
  });

  it('lists what is short and takes nothing, unless that is asked for', async () => {
    for (let n = 2; n <= 30; n += 1) await seedUnit(database.db, floor, `H3-00${n}`);
    await expect(issueToBatch({ batchNumber: 12 }, ctx)).rejects.toThrow(
      'The stores are short of R-0805-4K7 (308 wanted, 200 there). Nothing was issued.',
    );
    expect(await onHand(floor.lots.resistors)).toBe(200);
    expect(await issueToBatch({ batchNumber: 12, evenIfShort: true }, ctx)).toMatchObject({
      quantity: 200,
      shortages: [{ partNumber: 'R-0805-4K7', wanted: 308, available: 200 }],
    });
  });

  it('never takes from a barred lot', async () => {
    await setLotState({ lot: floor.lots.resistors, state: 'barred', reason: 'wrong value' }, ctx);
    await expect(issueToBatch({ batchNumber: 12 }, ctx)).rejects.toThrow('(11 wanted, 0 there)');
  });

  it('two people issuing at once take it once', async () => {
    const tries = await Promise.allSettled([1, 2].map(() => issueToBatch({ batchNumber: 12 }, ctx)));
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await onHand(floor.lots.resistors)).toBe(189);
  });
});

describe('finishing a kit', () => {
  async function pickAll(serial: string): Promise<void> {
    await pick(serial, floor.lots.transistors);
    await pick(serial, floor.lots.crystals);
  }

  it('says what is missing', async () => {
    await pick('H3-0001', floor.lots.transistors);
    await expect(finishKit({ serial: 'H3-0001' }, ctx)).rejects.toThrow(
      'The kit of H3-0001 still lacks X-4915 (4), R-0805-4K7 (10).',
    );
  });

  it('tears the stub off once everything is there, and not twice', async () => {
    await pickAll('H3-0001');
    await issueToBatch({ batchNumber: 12 }, ctx);
    expect(await finishKit({ serial: 'H3-0001', minutes: 24 }, ctx)).toEqual({
      serial: 'H3-0001',
      stage: 'boards',
    });
    const found = await getUnitHistory(database.db, 'H3-0001');
    expect(found?.kitFinishedAt).toMatchObject({ by: 'Ruth Osei', minutes: 24 });
    expect(found?.steps[0]?.records).toMatchObject([{ round: 1, minutes: 24 }]);
    await expect(finishKit({ serial: 'H3-0001' }, ctx)).rejects.toMatchObject({ code: 'conflict' });
    await expect(pick('H3-0001', floor.lots.transistors)).rejects.toThrow('Its kit is finished');
  });

  it('does not count the same issued parts for two units', async () => {
    await issueToBatch({ batchNumber: 12 }, ctx);
    await seedUnit(database.db, floor, 'H3-0002');
    await pickAll('H3-0001');
    await pickAll('H3-0002');
    const tries = await Promise.allSettled([
      finishKit({ serial: 'H3-0001' }, ctx),
      finishKit({ serial: 'H3-0002' }, ctx),
    ]);
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(tries.find((one) => one.status === 'rejected')?.reason).toHaveProperty(
      'message',
      expect.stringMatching(/still lacks R-0805-4K7 \(9\)/),
    );
  });

  it('needs no batch: a unit built ahead is picked part by part', async () => {
    await seedUnit(database.db, floor, 'H3-0009', { batchId: null });
    await pickAll('H3-0009');
    await pick('H3-0009', floor.lots.resistors);
    expect(await finishKit({ serial: 'H3-0009' }, ctx)).toMatchObject({ stage: 'boards' });
  });
});

describe('from a lot to its units and back', () => {
  it('names the units it was scanned into and those it reached by the batch', async () => {
    await seedUnit(database.db, floor, 'H3-0002', { options: ['band.40m', 'band.30m', 'band.20m'] });
    const elsewhere = { ...floor, batch: { batchId: floor.batch.batchId, number: 12 } };
    await seedUnit(database.db, elsewhere, 'H3-0003', { batchId: null });
    await pick('H3-0001', floor.lots.crystals);
    await issueToBatch({ batchNumber: 12 }, ctx);

    const crystals = await getLot(database.db, floor.lots.crystals);
    expect(crystals?.units).toMatchObject([
      { serial: 'H3-0001', quantity: 4, designators: ['X1', 'X2', 'X3', 'X4'] },
    ]);
    const resistors = await getLot(database.db, floor.lots.resistors);
    expect(resistors?.units.map(({ serial, quantity }) => [serial, quantity])).toEqual([
      ['H3-0001', null],
      ['H3-0002', null],
    ]);
    const unit = await getUnitHistory(database.db, 'H3-0001');
    const lotsInIt = unit?.kit.flatMap((line) => line.picks.map(({ lotNumber }) => lotNumber));
    expect(lotsInIt).toEqual([floor.lots.crystals]);
    expect(unit?.kit.find((line) => line.part.trace === 'batch')).toMatchObject({
      fromBatch: 10,
      missing: 0,
    });
  });

  it('every pick stands on a store entry of its lot', async () => {
    await pick('H3-0001', floor.lots.transistors);
    await issueToBatch({ batchNumber: 12 }, ctx);
    const rows = await database.db
      .select({
        picked: picks.quantity,
        moved: storeEntries.quantity,
        ofPick: picks.lotId,
        ofEntry: storeEntries.lotId,
      })
      .from(picks)
      .innerJoin(storeEntries, eq(storeEntries.id, picks.storeEntryId));
    expect(rows).toHaveLength(2);
    for (const row of rows) expect([row.moved, row.ofEntry]).toEqual([-row.picked, row.ofPick]);
  });

  it('does not lose a unit that has left', async () => {
    await pick('H3-0001', floor.lots.transistors);
    await database.db.update(units).set({ stage: 'gone' }).where(eq(units.serial, 'H3-0001'));
    expect((await getLot(database.db, floor.lots.transistors))?.units).toMatchObject([{ stage: 'gone' }]);
  });
});
