import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { judge, marginOf } from './decision';
import type { Verdict } from './types';

const ORDER: Record<Verdict, number> = { pass: 0, too_close: 1, fail: 2, not_run: 3 };
const real = fc.double({ min: -200, max: 200, noNaN: true });
const spread = fc.double({ min: 0, max: 20, noNaN: true });
const decision = fc.constantFrom('guarded' as const, 'simple' as const);

describe('judge, its laws', () => {
  it('never gets better as the reading rises towards a maximum', () => {
    fc.assert(
      fc.property(real, real, real, spread, decision, (a, b, upper, U, rule) => {
        const of = (value: number) => ORDER[judge({ value, U, lower: null, upper, decision: rule })];
        return of(Math.min(a, b)) <= of(Math.max(a, b));
      }),
    );
  });

  it('never gets better as the reading falls towards a minimum', () => {
    fc.assert(
      fc.property(real, real, real, spread, decision, (a, b, lower, U, rule) => {
        const of = (value: number) => ORDER[judge({ value, U, lower, upper: null, decision: rule })];
        return of(Math.max(a, b)) <= of(Math.min(a, b));
      }),
    );
  });

  it('a wider U never turns a fail into a pass, nor anything but a pass into a pass', () => {
    fc.assert(
      fc.property(real, real, spread, spread, (value, upper, U, more) => {
        const narrow = judge({ value, U, lower: null, upper, decision: 'guarded' });
        const wide = judge({ value, U: U + more, lower: null, upper, decision: 'guarded' });
        return wide !== 'pass' || narrow === 'pass';
      }),
    );
  });

  it('a guarded pass is a simple pass, and a guarded fail a simple fail', () => {
    fc.assert(
      fc.property(real, real, real, spread, (value, one, other, U) => {
        const limits = { value, U, lower: Math.min(one, other), upper: Math.max(one, other) };
        const guarded = judge({ ...limits, decision: 'guarded' });
        return guarded === 'too_close' || judge({ ...limits, decision: 'simple' }) === guarded;
      }),
    );
  });
});

describe('judge', () => {
  it.each([
    ['inside both', 38, 'pass'],
    ['on the acceptance limit', 95, 'pass'],
    ['within U of the upper', 97, 'too_close'],
    ['within U of the lower', -104, 'too_close'],
    ['under the lower', -106, 'fail'],
  ] as const)('%s', (_, value, verdict) => {
    expect(judge({ value, U: 5, lower: -100, upper: 100, decision: 'guarded' })).toBe(verdict);
  });

  it('does not run without a limit or on a number that is none', () => {
    expect(judge({ value: 1, U: 0, lower: null, upper: null, decision: 'simple' })).toBe('not_run');
    expect(judge({ value: NaN, U: 0, lower: 0, upper: null, decision: 'simple' })).toBe('not_run');
    expect(judge({ value: 1, U: NaN, lower: 0, upper: null, decision: 'guarded' })).toBe('not_run');
  });

  it('measures the margin to the nearer limit', () => {
    expect(marginOf(38, -100, 100)).toBe(62);
    expect(marginOf(-51, null, -47)).toBe(4);
    expect(marginOf(1, null, null)).toBeNull();
  });
});
