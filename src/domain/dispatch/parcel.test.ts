import { describe, expect, it } from 'vitest';
import type { StaffRole } from '~/domain/people/roles';
import { allHasLeft, canAskForBalance, parcelCan, seesAddressee } from './parcel';

describe('a parcel', () => {
  it('is shipped or taken apart only while it is here', () => {
    expect([parcelCan.ship('packed').ok, parcelCan.unpack('packed').ok]).toEqual([true, true]);
    expect([parcelCan.ship('shipped').ok, parcelCan.unpack('shipped').ok]).toEqual([false, false]);
  });

  it.each<[StaffRole, boolean, boolean]>([
    ['owner', true, true],
    ['bookkeeper', true, true],
    ['shipper', true, false],
    ['builder', false, false],
    ['tester', false, false],
  ])('shows its address to the %s, packed: %s, shipped: %s', (role, packed, shipped) => {
    expect(seesAddressee([role], 'packed')).toBe(packed);
    expect(seesAddressee([role], 'shipped')).toBe(shipped);
  });
});

describe('an order', () => {
  it.each([
    [3, 2, false],
    [3, 3, true],
    [0, 0, false],
  ])('of %i rigs, %i gone, has all left: %s', (rigsOrdered, unitsGone, left) => {
    expect(allHasLeft({ rigsOrdered, unitsGone })).toBe(left);
  });

  it.each([
    [{ balanceMinor: 100, paidMinor: 50, unitsPassed: 1 }, true],
    [{ balanceMinor: 0, paidMinor: 150, unitsPassed: 1 }, false],
    [{ balanceMinor: 150, paidMinor: 0, unitsPassed: 1 }, false],
    [{ balanceMinor: 100, paidMinor: 50, unitsPassed: 0 }, false],
  ])('with %o may be asked for its balance: %s', (facts, may) => {
    expect(canAskForBalance(facts).ok).toBe(may);
  });
});
