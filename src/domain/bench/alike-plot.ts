import type { PlotFrame } from './loss-plot';

/** Under so many values a picture would claim more than it knows. */
export const FEWEST_ALIKE = 5;

/** A value that stands beside the reading in hand. */
export interface AlikeValue {
  value: number;
  /** From an old sheet, and not from a closed run. */
  isHistory: boolean;
}

interface Given {
  values: readonly AlikeValue[];
  /** What is read now; null where nothing is. */
  reading: number | null;
  lower: number | null;
  upper: number | null;
}

/** Dots over an axis whose values rise to the right, as on the limit bar, in the coordinates of a drawing. */
export interface AlikePlot {
  dots: { x: number; y: number; isHistory: boolean }[];
  reading: number | null;
  limits: { x: number; value: number; side: 'lower' | 'upper' }[];
  /** Of the closed runs alone. */
  median: number;
  ends: { min: number; max: number };
}

/** Dots keep this far apart, or stand upon each other. */
const DOT_ROOM = 9;

/** Lays the values out in a frame; null where no closed run has one. */
export function alikePlot({ values, reading, lower, upper }: Given, frame: PlotFrame): AlikePlot | null {
  const middle = median(values.filter(({ isHistory }) => !isHistory).map(({ value }) => value));
  if (middle === null) return null;
  const marks = [...values.map(({ value }) => value), reading, lower, upper].filter((mark) => mark !== null);
  const smallest = Math.min(...marks);
  const largest = Math.max(...marks);
  const room = (largest - smallest || Math.abs(largest) || 1) * 0.06;
  const [min, max] = [smallest - room, largest + room];
  const x = (value: number): number =>
    frame.left + ((value - min) / (max - min)) * (frame.right - frame.left);
  const rows: number[][] = [];
  const placed = [...values]
    .sort((a, b) => a.value - b.value)
    .map(({ value, isHistory }) => {
      const at = x(value);
      const free = rows.findIndex((row) => row.every((other) => Math.abs(other - at) >= DOT_ROOM));
      const row = free < 0 ? rows.length : free;
      rows[row] = [...(rows[row] ?? []), at];
      return { x: at, row, isHistory };
    });
  // Many of one value would grow out of the frame: they then stand closer.
  const step = Math.min(DOT_ROOM, (frame.bottom - frame.top) / Math.max(1, rows.length - 1));
  const limits: AlikePlot['limits'] = [];
  if (lower !== null) limits.push({ x: x(lower), value: lower, side: 'lower' });
  if (upper !== null) limits.push({ x: x(upper), value: upper, side: 'upper' });
  return {
    dots: placed.map((dot) => ({ x: dot.x, y: frame.bottom - dot.row * step, isHistory: dot.isHistory })),
    reading: reading === null ? null : x(reading),
    limits,
    median: x(middle),
    ends: { min, max },
  };
}

/** The middle value, or the mean of the two in the middle; null of none. */
export function median(values: readonly number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)];
  const lower = sorted[Math.floor((sorted.length - 1) / 2)];
  return upper === undefined || lower === undefined ? null : (lower + upper) / 2;
}

/** Where a reading stands among others, in words: `above 7 of them, below 5`. */
export function placeAmong(reading: number, values: readonly number[]): string {
  const under = values.filter((value) => value < reading).length;
  const over = values.filter((value) => value > reading).length;
  const same = values.length - under - over;
  if (under === values.length) return 'above all of them';
  if (over === values.length) return 'below all of them';
  if (same === values.length) return 'the same as all of them';
  return [
    under > 0 && `above ${String(under)} of them`,
    same > 0 && `the same as ${String(same)}`,
    over > 0 && `below ${String(over)}${under > 0 ? '' : ' of them'}`,
  ]
    .filter((part) => part !== false)
    .join(', ');
}
