import { describe, expect, it } from 'vitest';
import { parseValue } from '~/domain/planning/bom-import/values';

// IEC 60062 letter and digit code, read in an encyclopedia's summary, not in the standard. The last rows are spellings
// seen in published bills of materials ("56p/100" is value and voltage); 4R7 on a coil is common and not of the standard.
describe('values by IEC 60062 (second hand)', () => {
  it.each([
    ['R47', 'R', 0.47, 'ohm'],
    ['4R7', 'R', 4.7, 'ohm'],
    ['470R', 'R', 470, 'ohm'],
    ['4K7', 'R', 4700, 'ohm'],
    ['47K3', 'R', 47_300, 'ohm'],
    ['4M7', 'R', 4.7e6, 'ohm'],
    ['4n7', 'C', 4.7e-9, 'F'],
    ['8p2', 'C', 8.2e-12, 'F'],
    ['4R7', 'L', 4.7e-6, 'H'],
    ['28R7', 'R', 28.7, 'ohm'],
    ['5K6', 'R', 5600, 'ohm'],
  ])('%s at %s is %s %s', (text, prefix, value, unit) => {
    expect(parseValue(text, prefix)).toEqual({ ok: true, value, unit, rest: '' });
  });

  it('56p/100 is 56 pF, and 100 follows it', () => {
    expect(parseValue('56p/100', 'C')).toEqual({ ok: true, value: 5.6e-11, unit: 'F', rest: '100' });
  });
});
