import { describe, expect, it } from 'vitest';
import { parseValue } from './values';

describe('values', () => {
  it.each([
    ['4700', 'R', 4700, 'ohm', ''],
    ['4.7k', 'R', 4700, 'ohm', ''],
    ['4,7k', 'R', 4700, 'ohm', ''],
    ['4,7 kΩ', 'R', 4700, 'ohm', ''],
    ['4.7 k', 'R', 4700, 'ohm', ''],
    ['49.9R', 'R', 49.9, 'ohm', ''],
    ['0R', 'R', 0, 'ohm', ''],
    ['330 1%', 'R', 330, 'ohm', '1%'],
    ['24  1/4W', 'R', 24, 'ohm', '1/4W'],
    ['10k', 'RV', 10_000, 'ohm', ''],
    ['10k', '', 10_000, null, ''],
    ['100 ohm', '', 100, 'ohm', ''],
    ['100n', 'C', 1e-7, 'F', ''],
    ['0.1uF 50V', 'C', 1e-7, 'F', '50V'],
    ['0,1µF', 'C', 1e-7, 'F', ''],
    ['100u/16V', 'C', 1e-4, 'F', '16V'],
    ['4u7F', 'C', 4.7e-6, 'F', ''],
    ['100nF/RF', 'C', 1e-7, 'F', 'RF'],
    ['1u MLCC', 'C', 1e-6, 'F', 'MLCC'],
    ['1000p', 'C', 1e-9, 'F', ''],
    ['1,66uH', 'L', 1.66e-6, 'H', ''],
    ['1uH 3.7A', 'L', 1e-6, 'H', '3.7A'],
    ['22u', 'L', 2.2e-5, 'H', ''],
    ['27 MHz', 'Y', 27e6, 'Hz', ''],
    ['20 Mhz', 'Y', 20e6, 'Hz', ''],
    ['66.6666 MHz', 'U', 66_666_600, 'Hz', ''],
  ])('%j at %s is %s %s', (text, prefix, value, unit, rest) => {
    expect(parseValue(text, prefix)).toEqual({ ok: true, value, unit, rest });
  });

  it.each([
    ['', 'R'],
    ['C', 'C'],
    ['2N7002', 'Q'],
    ['74ACT00', 'U'],
    ['1N4148W', 'D'],
    ['FB 600Z', 'L'],
    ['DNP', 'C'],
    ['1:1', 'T'],
    ['T37_2(10T)', 'L'],
    ['4K7', 'C'],
  ])('%j at %s is none', (text, prefix) => {
    expect(parseValue(text, prefix)).toMatchObject({ ok: false });
  });

  it('is refused where it can mean two things', () => {
    expect(parseValue('1,200', 'R')).toEqual({
      ok: false,
      reason: '“1,200” can be read as a decimal or as thousands',
    });
    expect(parseValue('33', 'C')).toEqual({ ok: false, reason: '“33” has no unit' });
  });
});
