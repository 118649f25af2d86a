import { describe, expect, it } from 'vitest';
import { batchOpening } from './planning-batches';

const typed = {
  modelSlug: 'holm-3',
  places: '5',
  price: '400.50',
  deposit: '',
  currency: 'eur',
  estimatedOn: '',
};

describe('a batch as it is typed', () => {
  it('has its amounts in minor units, and nothing where a field stayed empty', () => {
    expect(batchOpening.parse(typed)).toEqual({
      modelSlug: 'holm-3',
      places: 5,
      priceMinor: 40_050,
      depositMinor: null,
      currency: 'EUR',
      estimatedOn: null,
    });
  });

  it.each([
    ['estimatedOn', { estimatedOn: '2027-02-31' }],
    ['estimatedOn', { estimatedOn: 'soon' }],
    ['currency', { currency: 'XYZ' }],
    ['price', { price: '400.505' }],
    ['price', { price: '0' }],
    ['deposit', { deposit: '400.50' }],
    ['places', { places: '0' }],
  ])('says at %s what is wrong with %o', (field, changes) => {
    const parsed = batchOpening.safeParse({ ...typed, ...changes });
    expect(parsed.error?.issues.map(({ path }) => path[0])).toContain(field);
  });
});
