import { expect, test } from 'vitest';
import { remedyHeld } from './remedy-held';

const harmonic = { quantityKey: 'harmonic_2', band: '20m' };
const power = { quantityKey: 'rf_power', band: '20m' };
const at = (hour: number) => new Date(Date.UTC(2027, 2, 9, hour));
const rework = { closedAt: at(10), seen: [harmonic] };

test.each([
  ['no run lies between', [], true],
  ['one failed at the same point', [{ openedAt: at(11), failed: [harmonic, power] }], false],
  ['one failed at another point only', [{ openedAt: at(11), failed: [power] }], true],
  ['it failed on another band', [{ openedAt: at(11), failed: [{ ...harmonic, band: '40m' }] }], true],
  ['one was undecided', [{ openedAt: at(11), failed: [] }], true],
  ['the run that failed came before', [{ openedAt: at(9), failed: [harmonic] }], true],
])('where %s', (_, between, held) => {
  expect(remedyHeld(rework, between)).toBe(held);
});

test('a rework that no run had asked for holds only where none failed', () => {
  const byHand = { ...rework, seen: [] };
  expect(remedyHeld(byHand, [{ openedAt: at(11), failed: [power] }])).toBe(false);
  expect(remedyHeld(byHand, [{ openedAt: at(11), failed: [] }])).toBe(true);
});
