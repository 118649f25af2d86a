import { describe, expect, it } from 'vitest';
import type { Option, OptionGroup } from './configuration';
import { checkConfiguration, priceOf } from './configuration';

const option = (key: string, label: string, more: Partial<Option> = {}): Option => ({
  key,
  label,
  priceMinor: 0,
  needs: [],
  excludes: [],
  ...more,
});

const groups: OptionGroup[] = [
  {
    key: 'bands',
    label: 'Bands',
    min: 3,
    max: 3,
    options: ['40', '30', '20', '15'].map((band) => option(`band.${band}m`, `${band} m`)),
  },
  {
    key: 'receiver',
    label: 'Receiver',
    min: 0,
    max: 2,
    options: [
      option('filter.narrow', 'Narrow filter', { priceMinor: 4800 }),
      option('filter.peak', 'Audio peak', { priceMinor: 900, excludes: ['filter.narrow'] }),
    ],
  },
  {
    key: 'key',
    label: 'Key socket',
    min: 1,
    max: 1,
    options: [
      option('key.plain', 'Plain socket'),
      option('key.keyer', 'Built-in keyer', { priceMinor: 2200, needs: ['band.20m'] }),
    ],
  },
];
const bands = ['band.40m', 'band.30m', 'band.20m'];

describe('a configuration', () => {
  it('that keeps the rules is right', () => {
    expect(checkConfiguration(groups, new Set([...bands, 'filter.narrow', 'key.keyer']))).toEqual({
      ok: true,
    });
  });

  it.each([
    [['band.40m', 'band.30m', 'key.plain'], [['bands', 'Bands: choose exactly three, not two.']]],
    [[...bands, 'band.15m', 'key.plain'], [['bands', 'Bands: choose exactly three, not four.']]],
    [bands, [['key', 'Key socket: choose exactly one, not none.']]],
    [
      [...bands, 'key.plain', 'filter.narrow', 'filter.peak'],
      [['receiver', 'Audio peak cannot be had together with Narrow filter.']],
    ],
    [['band.40m', 'band.30m', 'band.15m', 'key.keyer'], [['key', 'Built-in keyer needs 20 m.']]],
    [[...bands, 'key.plain', 'band.6m'], [[null, 'This model has no option “band.6m”.']]],
  ])('%j is refused with its reason', (chosen, expected) => {
    const result = checkConfiguration(groups, new Set(chosen));
    expect(result.ok ? [] : result.problems.map((p) => [p.groupKey, p.reason])).toEqual(expected);
  });

  it('says at least and at most where the rule is a range', () => {
    const range = [
      { key: 'g', label: 'Leads', min: 1, max: 2, options: ['a', 'b', 'c'].map((k) => option(k, k)) },
    ];
    expect(checkConfiguration(range, new Set())).toMatchObject({
      problems: [{ reason: 'Leads: choose at least one, not none.' }],
    });
    expect(checkConfiguration(range, new Set(['a', 'b', 'c']))).toMatchObject({
      problems: [{ reason: 'Leads: choose at most two, not three.' }],
    });
  });

  it('costs the model and its options', () => {
    expect(priceOf(38900, groups, new Set([...bands, 'filter.narrow']))).toBe(43700);
    expect(priceOf(38900, groups, new Set(bands))).toBe(38900);
  });
});
