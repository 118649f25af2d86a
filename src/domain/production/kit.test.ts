import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { needOfBatch, placesFor, progressOf } from './kit';

const line = { lineId: 7, quantity: 3, designators: ['Q5', 'Q6', 'Q7'] };

describe('progressOf', () => {
  it('counts the picks of its own line and names the places left', () => {
    const picks = [
      { lineId: 7, quantity: 2, designators: ['Q5', 'Q6'] },
      { lineId: 8, quantity: 9, designators: ['R1'] },
    ];
    expect(progressOf(line, picks, null)).toEqual({
      picked: 2,
      fromBatch: 0,
      missing: 1,
      openPlaces: ['Q7'],
    });
  });

  it.each([
    { issued: 0, taken: 0, fromBatch: 0, missing: 3 },
    { issued: 9, taken: 6, fromBatch: 3, missing: 0 },
    { issued: 8, taken: 6, fromBatch: 2, missing: 1 },
    { issued: 5, taken: 6, fromBatch: 0, missing: 3 },
  ])(
    'takes from $issued issued what $taken in finished kits leave',
    ({ issued, taken, fromBatch, missing }) => {
      expect(progressOf(line, [], { issued, taken })).toMatchObject({ fromBatch, missing });
    },
  );
});

describe('placesFor', () => {
  it('fills one place a piece', () => {
    expect(placesFor(line, ['Q6', 'Q7'], 1)).toEqual(['Q6']);
  });
  it('names all places of what is cut from one length', () => {
    expect(placesFor({ quantity: 450, designators: ['L7'] }, ['L7'], 450)).toEqual(['L7']);
  });
});

describe('needOfBatch', () => {
  it('adds the units up before it rounds', () => {
    const units = [
      [{ lineId: 1, quantity: 10 }],
      [
        { lineId: 1, quantity: 10 },
        { lineId: 2, quantity: 1 },
      ],
    ];
    expect([...needOfBatch(units, (id) => (id === 1 ? 2.5 : 0))]).toEqual([
      [1, 21],
      [2, 1],
    ]);
  });

  it('is never less than the bare need, and with no allowance exactly that', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 100_000 }), { minLength: 1, maxLength: 30 }),
        fc.integer({ min: 0, max: 10_000 }),
        (quantities, hundredths) => {
          const units = quantities.map((quantity) => [{ lineId: 1, quantity }]);
          const bare = quantities.reduce((sum, quantity) => sum + quantity, 0);
          const need = needOfBatch(units, () => hundredths / 100).get(1) ?? 0;
          expect(needOfBatch(units, () => 0).get(1)).toBe(bare);
          expect(need).toBeGreaterThanOrEqual(bare);
          expect((need - 1) * 10_000).toBeLessThan(bare * (10_000 + hundredths));
        },
      ),
    );
  });
});
