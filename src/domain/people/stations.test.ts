import { expect, it } from 'vitest';
import { stationsOf, unusedStations } from './stations';

const nothing = { hasPart: false, hasBatch: false, hasOrder: false };
const keys = (list: { key: string }[]) => list.map(({ key }) => key);

it('a works that has only its bench sees no other room', () => {
  expect(keys(stationsOf(['owner'], nothing))).toEqual(['bench', 'office']);
  expect(keys(stationsOf(['builder'], nothing))).toEqual([]);
});

it('rooms show when they are first used', () => {
  expect(keys(stationsOf(['owner'], { ...nothing, hasPart: true }))).toEqual([
    'plan',
    'stores',
    'bench',
    'office',
  ]);
  expect(keys(stationsOf(['owner'], { hasPart: true, hasBatch: true, hasOrder: true }))).toEqual([
    'counter',
    'plan',
    'stores',
    'floor',
    'bench',
    'dispatch',
    'office',
  ]);
});

it.each([nothing, { ...nothing, hasPart: true }, { hasPart: true, hasBatch: true, hasOrder: true }])(
  'every room of the owner either shows or is named as not used yet: %j',
  (use) => {
    expect(stationsOf(['owner'], use).length + unusedStations(use).length).toBe(7);
  },
);
