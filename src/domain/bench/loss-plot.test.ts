import { describe, expect, it } from 'vitest';
import { lossPlot, shownRows } from './loss-plot';

const part = (loss: [number, number][]) => ({ loss });
const flat = part([
  [1e6, 10],
  [30e6, 10],
]);

describe('a loss as a picture', () => {
  const frame = { left: 0, right: 100, top: 0, bottom: 50 };

  it('runs from its first to its last frequency, over log frequency', () => {
    const plot = lossPlot(
      part([
        [1e6, 10],
        [10e6, 10.5],
        [100e6, 11],
      ]),
      frame,
    );
    expect(plot?.points.map(({ x }) => Math.round(x))).toEqual([0, 50, 100]);
    expect(plot?.freqTicks.map(({ label }) => label)).toContain('10 MHz');
    const [first, , last] = plot?.points ?? [];
    expect(first?.y).toBeGreaterThan(last?.y ?? Infinity);
  });

  it('of a loss that is the same everywhere lies inside its frame', () => {
    const ys = lossPlot(flat, frame)?.points.map(({ y }) => y) ?? [];
    expect(ys.every((y) => y >= 0 && y <= 50)).toBe(true);
  });

  it('of a single row is none', () => {
    expect(lossPlot(part([[1e6, 10]]), frame)).toBeNull();
  });

  it('shows the first and the last of many rows in its table', () => {
    const loss = Array.from({ length: 801 }, (_, index): [number, number] => [1e6 + index, 10]);
    const rows = shownRows({ loss });
    expect(rows.length).toBeLessThanOrEqual(62);
    expect([rows[0], rows.at(-1)]).toEqual([loss[0], loss[800]]);
  });
});
