import { describe, expect, it } from 'vitest';
import { maySeeCallSign, maySeeStockValue, mayWorkOnFloor } from './may-see';

describe('maySeeCallSign', () => {
  it.each([
    { role: 'owner', stage: 'kit', sees: true },
    { role: 'builder', stage: 'kit', sees: true },
    { role: 'tester', stage: 'gone', sees: true },
    { role: 'bookkeeper', stage: 'boards', sees: true },
    { role: 'shipper', stage: 'final_test', sees: false },
    { role: 'shipper', stage: 'pack', sees: true },
    { role: 'shipper', stage: 'ship', sees: true },
    { role: 'shipper', stage: 'gone', sees: false },
  ] as const)('$role at $stage: $sees', ({ role, stage, sees }) => {
    expect(maySeeCallSign([role], stage)).toBe(sees);
  });
  it('is closed to a buyer', () => expect(maySeeCallSign([], 'pack')).toBe(false));
});

describe('stock', () => {
  it.each([
    { role: 'owner', value: true, works: true },
    { role: 'bookkeeper', value: true, works: false },
    { role: 'builder', value: false, works: true },
    { role: 'tester', value: false, works: false },
    { role: 'shipper', value: false, works: false },
  ] as const)('$role', ({ role, value, works }) => {
    expect(maySeeStockValue([role])).toBe(value);
    expect(mayWorkOnFloor([role])).toBe(works);
  });
});
