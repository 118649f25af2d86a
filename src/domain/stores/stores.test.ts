import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { StoreEntry } from './ledger';
import { checkEntry, onHand, reversalOf } from './ledger';
import type { Lot } from './lots';
import { canPick, chooseLots, lotStates } from './lots';

const lot = (id: number, day: number, have: number, state: Lot['state'] = 'usable'): Lot => ({
  id,
  number: `L-${id}`,
  state,
  onHand: have,
  receivedAt: new Date(Date.UTC(2027, 0, day)),
});

describe('picking from a lot', () => {
  it.each([
    [lot(1, 1, 10), 10, { ok: true }],
    [lot(1, 1, 10), 11, { ok: false, reason: 'Lot L-1 has 10, and 11 are wanted.' }],
    [lot(1, 1, 10, 'barred'), 1, { ok: false, reason: 'Lot L-1 is barred.' }],
    [
      lot(1, 1, 10, 'waiting'),
      1,
      { ok: false, reason: 'Lot L-1 waits to be looked at and is not usable yet.' },
    ],
    [lot(1, 1, 10), 0, { ok: false, reason: 'A pick is of one or more.' }],
    [lot(1, 1, 10), 0.5, { ok: false, reason: 'A pick is of one or more.' }],
  ])('%j, %s', (from, quantity, expected) => {
    expect(canPick(from, quantity)).toEqual(expected);
  });
});

describe('choosing lots', () => {
  it('takes the oldest first, and the next where one is not enough', () => {
    expect(chooseLots([lot(3, 5, 10), lot(1, 9, 10), lot(2, 5, 4)], 6)).toEqual({
      ok: true,
      picks: [
        { lotId: 2, quantity: 4 },
        { lotId: 3, quantity: 2 },
      ],
    });
  });

  it('passes over what is barred, waiting or empty', () => {
    const lots = [lot(1, 1, 5, 'barred'), lot(2, 2, 5, 'waiting'), lot(3, 3, 0), lot(4, 4, 5)];
    expect(chooseLots(lots, 2)).toEqual({ ok: true, picks: [{ lotId: 4, quantity: 2 }] });
    expect(chooseLots(lots, 7)).toEqual({
      ok: false,
      reason: '7 are wanted, and usable lots have 5.',
      short: 2,
    });
    expect(chooseLots([], 1)).toEqual({
      ok: false,
      reason: '1 are wanted, and usable lots have none.',
      short: 1,
    });
    expect(chooseLots(lots, 0)).toMatchObject({ ok: false, short: 0 });
  });

  const anyLots = fc
    .array(
      fc.record({
        day: fc.integer({ min: 1, max: 300 }),
        have: fc.nat(20),
        state: fc.constantFrom(...lotStates),
      }),
    )
    .map((all) => all.map(({ day, have, state }, index) => lot(index + 1, day, have, state)));

  it('takes exactly what is wanted, never from a lot that refuses, and no newer lot before an older is used up', () => {
    fc.assert(
      fc.property(anyLots, fc.integer({ min: 1, max: 60 }), (lots, quantity) => {
        const usable = lots.filter((one) => one.state === 'usable');
        const result = chooseLots(lots, quantity);
        expect(result.ok).toBe(onHand(usable.map((one) => ({ quantity: one.onHand }))) >= quantity);
        if (!result.ok) return;
        expect(onHand(result.picks)).toBe(quantity);
        const taken = new Map(result.picks.map((pick) => [pick.lotId, pick.quantity]));
        for (const one of lots) {
          const from = taken.get(one.id);
          if (from !== undefined) expect(canPick(one, from)).toEqual({ ok: true });
        }
        const newest = Math.max(
          ...usable.filter((one) => taken.has(one.id)).map((one) => one.receivedAt.getTime()),
        );
        for (const one of usable.filter((u) => u.receivedAt.getTime() < newest)) {
          expect(taken.get(one.id) ?? 0).toBe(one.onHand);
        }
      }),
    );
  });
});

describe('the ledger', () => {
  const entry = (id: number, quantity: number, reversesId: number | null = null): StoreEntry => ({
    id,
    lotId: 1,
    quantity,
    reversesId,
  });

  it('takes an entry back once, and not what was used since', () => {
    const receipt = entry(1, 100);
    const pick = entry(2, -30);
    expect(reversalOf(pick, [receipt, pick])).toEqual({ ok: true, quantity: 30 });
    expect(reversalOf(pick, [receipt, pick, entry(3, 30, 2)])).toEqual({
      ok: false,
      reason: 'This entry is reversed already.',
    });
    expect(reversalOf(entry(3, 30, 2), [receipt, pick, entry(3, 30, 2)])).toMatchObject({ ok: false });
    expect(reversalOf(receipt, [receipt, pick])).toEqual({
      ok: false,
      reason: 'The lot has 70; 100 cannot be taken from it.',
    });
  });

  it('refuses nothing, parts of one, and more than there is', () => {
    expect(checkEntry(5, 0).ok).toBe(false);
    expect(checkEntry(5, 0.5).ok).toBe(false);
    expect(checkEntry(5, -6)).toEqual({ ok: false, reason: 'The lot has 5; 6 cannot be taken from it.' });
    expect(checkEntry(5, -5)).toEqual({ ok: true, onHand: 0 });
  });

  it('keeps the sum of entries, never below zero, whatever is entered and reversed', () => {
    const deed = fc.oneof(
      fc.record({ kind: fc.constant('move' as const), quantity: fc.integer({ min: -20, max: 20 }) }),
      fc.record({ kind: fc.constant('reverse' as const), index: fc.nat(50) }),
    );
    fc.assert(
      fc.property(fc.array(deed, { maxLength: 60 }), (deeds) => {
        const entries: StoreEntry[] = [];
        let have = 0;
        for (const one of deeds) {
          const target = one.kind === 'reverse' ? entries[one.index] : undefined;
          if (one.kind === 'reverse' && !target) continue;
          const before = have;
          if (target) {
            const reversal = reversalOf(target, entries);
            if (!reversal.ok) continue;
            entries.push(entry(entries.length + 1, reversal.quantity, target.id));
            have += reversal.quantity;
            expect(have).toBe(before - target.quantity);
          } else if (one.kind === 'move') {
            const checked = checkEntry(have, one.quantity);
            if (!checked.ok) continue;
            entries.push(entry(entries.length + 1, one.quantity));
            have = checked.onHand;
          }
          expect(onHand(entries)).toBe(have);
          expect(have).toBeGreaterThanOrEqual(0);
        }
        const reversed = entries.map((e) => e.reversesId).filter((id) => id !== null);
        expect(new Set(reversed).size).toBe(reversed.length);
      }),
    );
  });
});
