import { describe, expect, it } from 'vitest';
import { placeLabels } from './sweep-labels';
import type { PlotLabel } from './sweep-labels';

const frame = { left: 60, right: 700, top: 0, bottom: 240 };
const label = (key: string, x: number, y: number, text = '2nd −52.1'): PlotLabel => ({
  ...{ key, x, y, text, tone: 'patina', isMarked: true },
});

describe('labels of a plot', () => {
  it('stand above their points where there is room', () => {
    expect(placeLabels([label('a', 100, 100)], frame)[0]).toMatchObject({ left: 105, top: 94 });
  });

  it('never cover one another', () => {
    const crowd = Array.from({ length: 12 }, (_, index) => label(String(index), 100 + 12 * index, 120));
    const placed = placeLabels(crowd, frame);
    expect(placed).toHaveLength(12);
    for (const [index, one] of placed.entries()) {
      for (const other of placed.slice(index + 1)) {
        const apart =
          Math.abs(one.top - other.top) >= 15 || Math.abs(one.left - other.left) >= one.text.length * 8.2;
        expect(apart).toBe(true);
      }
    }
  });

  it('stay inside the frame at its right edge', () => {
    const [placed] = placeLabels([label('a', 695, 100)], frame);
    expect((placed?.left ?? 0) + 9 * 8.2).toBeLessThanOrEqual(700);
  });

  it('are left out where there is no place at all', () => {
    const low = { ...frame, bottom: 20 };
    expect(placeLabels([label('a', 100, 10), label('b', 101, 10)], low)).toHaveLength(1);
  });
});
