import { expect, test } from 'vitest';
import { accessScopes, knownScopes, scopeInWords } from './access-scopes';

test('a scope that is no longer known opens nothing', () => {
  expect(knownScopes(['readings:write', 'everything', 'READINGS:WRITE'])).toEqual(['readings:write']);
  expect(knownScopes([])).toEqual([]);
});

test('every scope is told in words', () => {
  expect(accessScopes.map(scopeInWords)).toEqual(['Send readings and sweeps into your own open runs']);
});
