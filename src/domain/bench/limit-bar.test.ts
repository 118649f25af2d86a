import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { limitBar } from './limit-bar';
import type { LimitBar } from './limit-bar';

type Judged = Parameters<typeof limitBar>[0];

const judged = (over: Partial<Judged>): Judged => ({
  value: -51.1,
  low: -52,
  high: -50.2,
  lower: null,
  upper: -47.2,
  guard: 0.9,
  uUnit: 'dB',
  ...over,
});

function bar(over: Partial<Judged>, unit = 'dBc'): LimitBar {
  const model = limitBar(judged(over), unit);
  if (model === null) throw new Error('no bar');
  return model;
}

const kindAt = (model: LimitBar, at: number) =>
  model.zones.find((zone) => at >= zone.from && at <= zone.to)?.kind;

describe('limitBar', () => {
  it('draws a maximum with the clear zone to the left', () => {
    const model = bar({});
    expect(model.zones.map((zone) => zone.kind)).toEqual(['clear', 'too_close', 'over']);
    expect(model.limits).toMatchObject([{ value: -47.2, side: 'upper' }]);
    expect(kindAt(model, model.dot)).toBe('clear');
    expect(model.whisker?.from).toBeLessThan(model.dot);
    expect(model.whisker?.to).toBeGreaterThan(model.dot);
  });

  it('draws a minimum the same way round as the number line', () => {
    const model = bar({ value: 3.12, low: 2.97, high: 3.28, lower: 2.5, upper: null, guard: 0.2 }, 'W');
    expect(model.zones.map((zone) => zone.kind)).toEqual(['over', 'too_close', 'clear']);
    // The guard band of a power is in dB: wider above the limit than below it, in W.
    const close = model.zones[1];
    const limit = model.limits[0];
    if (close === undefined || limit === undefined) throw new Error('no zone');
    expect(close.to - limit.at).toBeGreaterThan(limit.at - close.from);
  });

  it('draws limits on both sides', () => {
    const model = bar({ value: 38, low: 34, high: 42, lower: -100, upper: 100, guard: 4, uUnit: 'Hz' }, 'Hz');
    expect(model.zones.map((zone) => zone.kind)).toEqual(['over', 'too_close', 'clear', 'too_close', 'over']);
  });

  it('has no clear zone where the guard bands meet, and none too close without a guard band', () => {
    const tight = bar({ value: 0, low: -9, high: 9, lower: -5, upper: 5, guard: 9, uUnit: 'Hz' }, 'Hz');
    expect(tight.zones.map((zone) => zone.kind)).toEqual(['over', 'too_close', 'too_close', 'over']);
    expect(bar({ guard: 0 }).zones.map((zone) => zone.kind)).toEqual(['clear', 'over']);
  });

  it('draws nothing without a value or a limit', () => {
    expect(limitBar(judged({ value: null }), 'dBc')).toBeNull();
    expect(limitBar(judged({ upper: null }), 'dBc')).toBeNull();
  });

  it('fills its length from 0 to 1 without gaps, the dot inside', () => {
    const real = fc.double({ min: -100, max: 100, noNaN: true });
    const size = fc.double({ min: 0, max: 20, noNaN: true });
    fc.assert(
      fc.property(real, real, real, size, (value, one, other, guard) => {
        const limits = { lower: Math.min(one, other), upper: Math.max(one, other) };
        const model = bar({ value, low: value - guard, high: value + guard, ...limits, guard });
        const ends = model.zones.flatMap((zone) => [zone.from, zone.to]);
        const joined = model.zones.every((zone, index) => {
          const before = model.zones[index - 1]?.to ?? 0;
          return Math.abs(zone.from - before) < 1e-9;
        });
        return (
          joined && ends[0] === 0 && Math.abs((ends.at(-1) ?? 0) - 1) < 1e-9 && model.dot > 0 && model.dot < 1
        );
      }),
    );
  });
});
