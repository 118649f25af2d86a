import { describe, expect, it } from 'vitest';
import { compareLetters, nextLetter } from './revision-letters';

describe('nextLetter', () => {
  it.each([
    { last: null, next: 'A' },
    { last: 'A', next: 'B' },
    { last: 'Y', next: 'Z' },
    { last: 'Z', next: 'AA' },
    { last: 'AA', next: 'AB' },
    { last: 'AZ', next: 'BA' },
    { last: 'ZY', next: 'ZZ' },
  ])('after $last comes $next', ({ last, next }) => {
    expect(nextLetter(last)).toBe(next);
  });

  it('refuses what is no letter of a revision, and what would follow the last', () => {
    expect(() => nextLetter('a')).toThrow();
    expect(() => nextLetter('ABC')).toThrow();
    expect(() => nextLetter('ZZ')).toThrow();
  });
});

describe('compareLetters', () => {
  it('puts Z before AA', () => {
    expect(['AA', 'B', 'Z', 'A', 'AB'].sort(compareLetters)).toEqual(['A', 'B', 'Z', 'AA', 'AB']);
  });
});
