import { describe, expect, it } from 'vitest';
import { parseDesignators, prefixOf } from './designators';

describe('designators', () => {
  it.each([
    ['R1, R4-R7', ['R1', 'R4', 'R5', 'R6', 'R7']],
    ['R4-7', ['R4', 'R5', 'R6', 'R7']],
    ['R1 – R3', ['R1', 'R2', 'R3']],
    ['R9..R11', ['R9', 'R10', 'R11']],
    ['C2 C5 C6', ['C2', 'C5', 'C6']],
    ['C1 ', ['C1']],
    ['Q1;Q2', ['Q1', 'Q2']],
    ['L1,L2 , L3,', ['L1', 'L2', 'L3']],
    ['U1A', ['U1A']],
    ['LED10, ZR401', ['LED10', 'ZR401']],
    ['C1 C1', ['C1', 'C1']],
    ['R5-R5', ['R5']],
    ['', []],
    ['  ', []],
  ])('%j are %j', (text, designators) => {
    expect(parseDesignators(text)).toEqual({ ok: true, designators });
  });

  it.each(['R?', '12', 'R1, four', 'R7-R4', 'R1-C4', 'R1-R99999', 'capacitor'])('%j is refused', (text) => {
    expect(parseDesignators(text)).toMatchObject({ ok: false });
  });

  it('have a prefix', () => {
    expect(prefixOf('LED10')).toBe('LED');
    expect(prefixOf('?')).toBe('');
  });
});
