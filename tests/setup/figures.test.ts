import { describe, expect, test } from 'vitest';
import { byTurns, judgeFigure, median, tableOf, type Figure } from './figures';

const sample: Figure = { name: 'sample', goal: 3, run: () => Promise.reject(new Error('not run here')) };

describe('a figure', () => {
  test('is the median of its samples, over that of its floor', () => {
    const outcome = judgeFigure(sample, { values: [90, 20, 30, 40, 10], floors: [10, 10, 20, 10, 10] });
    expect(outcome).toEqual({ name: 'sample', value: 30, floor: 10, ratio: 3, goal: 3, met: true });
  });

  test('misses its goal by however little', () => {
    const { met } = judgeFigure(sample, {
      values: [30.1, 30.1, 30.1, 30.1, 30.1],
      floors: [10, 10, 10, 10, 10],
    });
    expect(met).toBe(false);
  });

  test('without a floor is held against milliseconds', () => {
    const inTime = judgeFigure({ ...sample, goal: 50 }, { values: [50, 50, 50, 50, 50], floors: null });
    expect(inTime).toMatchObject({ floor: null, ratio: null, met: true });
    expect(judgeFigure({ ...sample, goal: 49 }, { values: [50, 50, 50, 50, 50], floors: null }).met).toBe(
      false,
    );
  });

  test.each([
    ['four samples', { values: [1, 1, 1, 1], floors: null }],
    ['four samples of its floor', { values: [1, 1, 1, 1, 1], floors: [1, 1, 1, 1] }],
    ['a sample that is no number', { values: [1, 1, 1, 1, NaN], floors: null }],
  ])('with %s is none', (_name, samples) => {
    expect(() => judgeFigure(sample, samples)).toThrow(/usable/);
  });
});

test('an even count has its median between the two in the middle', () => {
  expect(median([4, 1, 3, 2])).toBe(2.5);
});

test('work and floor are timed by turns, the first turns not counted', async () => {
  const order: string[] = [];
  const samples = await byTurns(
    () => order.push('work'),
    () => order.push('floor'),
    { times: 5, warmUp: 2 },
  );
  expect(order).toHaveLength(14);
  expect(order.slice(0, 4)).toEqual(['floor', 'work', 'floor', 'work']);
  expect(samples.values).toHaveLength(5);
  expect(samples.floors).toHaveLength(5);
});

test('the table says whether each goal is met', () => {
  const lines = tableOf([
    { name: 'a', value: 12.34, floor: 10, ratio: 1.234, goal: 3, met: true },
    { name: 'longer', value: 60, floor: null, ratio: null, goal: 50, met: false },
  ]).split('\n');
  expect(lines[0]).toMatch(/^figure +value +floor +ratio +goal +met$/);
  expect(lines[1]).toMatch(/^a +12\.3 ms +10\.0 ms +1\.23 × +≤ 3 × +yes$/);
  expect(lines[2]).toMatch(/^longer +60\.0 ms +≤ 50 ms +NO$/);
});
