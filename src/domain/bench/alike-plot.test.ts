import { describe, expect, it } from 'vitest';
import { alikePlot, median, placeAmong } from './alike-plot';

const frame = { left: 10, right: 310, top: 20, bottom: 80 };
const measured = (...values: number[]) => values.map((value) => ({ value, isHistory: false }));
const none = { reading: null, lower: null, upper: null };

describe('the values like a reading', () => {
  it('rise to the right, with the reading and the limits on the same axis', () => {
    const plot = alikePlot({ values: measured(5, 4, 4.5), reading: 4.8, lower: 3, upper: 6 }, frame);
    const [first, second, third] = plot?.dots.map(({ x }) => x) ?? [];
    const [lower, upper] = plot?.limits.map(({ x }) => x) ?? [];
    const across = [frame.left, lower, first, second, plot?.reading, third, upper, frame.right];
    expect(across).toEqual([...across].sort((a, b) => Number(a) - Number(b)));
    // 6 percent of room at each end of 3 to 6: 4.5 stands in the middle.
    expect(second).toBeCloseTo(160, 9);
    expect(plot?.median).toBeCloseTo(160, 9);
  });

  it('stand upon each other where they would cover each other', () => {
    const plot = alikePlot({ ...none, values: measured(1, 1, 1, 9) }, frame);
    expect(plot?.dots.map(({ y }) => y)).toEqual([80, 71, 62, 80]);
  });

  it('stay within the frame, however many are the same', () => {
    const plot = alikePlot({ ...none, values: measured(...Array.from({ length: 40 }, () => -51)) }, frame);
    const heights = plot?.dots.map(({ y }) => y) ?? [];
    expect(heights).toHaveLength(40);
    expect(Math.min(...heights)).toBeCloseTo(frame.top, 9);
    expect(new Set(heights).size).toBe(40);
  });

  it('keep apart what an old sheet says', () => {
    const values = [...measured(2), { value: 1, isHistory: true }];
    const plot = alikePlot({ ...none, values }, frame);
    expect(plot?.dots.map(({ isHistory }) => isHistory)).toEqual([true, false]);
    // The median is that of the runs alone: it stands at the 2.
    expect(plot?.median).toBe(plot?.dots[1]?.x);
  });

  it('are not drawn where there are none', () => {
    expect(alikePlot({ values: [], reading: 5, lower: 4, upper: null }, frame)).toBeNull();
  });
});

describe('the median', () => {
  it.each([
    [[3, 1, 2], 2],
    [[4, 1, 2, 3], 2.5],
    [[-50], -50],
    [[], null],
  ])('of %j is %s', (values, middle) => {
    expect(median(values)).toBe(middle);
  });
});

describe('the place of a reading', () => {
  it.each([
    [5, 'above 2 of them, below 1'],
    [6, 'above 2 of them, the same as 1'],
    [3, 'the same as 1, below 2 of them'],
    [9, 'above all of them'],
    [1, 'below all of them'],
  ])('of %d among 3, 4 and 6 is %s', (reading, words) => {
    expect(placeAmong(reading, [3, 4, 6])).toBe(words);
  });
});
