import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { evaluateFormula, parseFormula } from './formula';

function valueOf(text: string, values: Record<string, number> = {}): number {
  const read = parseFormula(text);
  if (!read.ok) throw new Error(read.reason);
  return evaluateFormula(read.formula, values);
}

describe('a formula', () => {
  it.each([
    ['1 + 2 * 3', 7],
    ['(1 + 2) * 3', 9],
    ['2 ^ 3 ^ 2', 512],
    ['-2 ^ 2', -4],
    ['2 ^ -1', 0.5],
    ['7 − 2 − 1', 4],
    ['8 / 4 / 2', 1],
    ['min(3, 1, 2) + max(4, 5)', 6],
    ['lg(1000)', 3],
    ['abs(-2.5e1)', 25],
    ['sqrt(16)', 4],
  ])('%s is %d', (text, value) => {
    expect(valueOf(text)).toBeCloseTo(value, 12);
  });

  it('takes its names from outside and says which it needs', () => {
    const read = parseFormula('rf_power / (supply_voltage * current_key_down)');
    if (!read.ok) throw new Error(read.reason);
    expect(read.formula.names).toEqual(['rf_power', 'supply_voltage', 'current_key_down']);
    const values = { rf_power: 5, supply_voltage: 12, current_key_down: 0.7 };
    expect(evaluateFormula(read.formula, values)).toBeCloseTo(0.5952, 4);
  });

  it('has no value where a name has none', () => {
    expect(valueOf('P + 1')).toBeNaN();
    expect(valueOf('constructor')).toBeNaN();
  });

  it.each([
    ['', 0, /empty/],
    ['1 +', 3, /too early/],
    ['1 + + 2', 4, /not expected/],
    ['(1', 2, /not closed/],
    ['1 2', 2, /not expected/],
    ['log(3)', 0, /no function log/],
    ['lg(1, 2)', 0, /takes 1/],
    ['min 3', 0, /needs brackets/],
    ['2 & 3', 2, /not expected/],
    ['('.repeat(60), 40, /nested/],
  ])('refuses %j and points at %d', (text, at, reason) => {
    const read = parseFormula(text);
    expect(read).toMatchObject({ ok: false, at });
    expect(read.ok ? '' : read.reason).toMatch(reason);
  });

  it('refuses a name that is not known where the known are said', () => {
    expect(parseFormula('P + Q', ['P'])).toMatchObject({ ok: false, at: 4 });
  });

  it('never throws, whatever is typed', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 400, unit: 'grapheme' }), (text) => {
        const read = parseFormula(text);
        expect(read.ok || read.reason.length > 0).toBe(true);
      }),
    );
    fc.assert(
      fc.property(fc.stringMatching(/^[-+*/^()0-9a-z, .]{0,60}$/), (text) => {
        const read = parseFormula(text);
        if (read.ok) expect(typeof evaluateFormula(read.formula, {})).toBe('number');
      }),
    );
  });
});
