import { describe, expect, it } from 'vitest';
import { changeInWords, detailsInWords } from './change-words';

describe('an entry of the ledger of changes', () => {
  it('is said in the trade’s words, or by its own name', () => {
    expect(changeInWords('run.close')).toBe('closed the run');
    expect(changeInWords('some_thing.odd')).toBe('some thing: odd');
  });

  it.each([
    [
      { state: { from: 'usable', to: 'barred' }, reason: 'cracked' },
      'state: usable → barred, reason: cracked',
    ],
    [{ quantity: 1, totalMinor: 71_300, currency: 'EUR' }, 'quantity: 1, total: €\u00a0713'],
    [{ dueNowMinor: 4_750, currency: 'EUR' }, 'due now: €\u00a047.50'],
    [{ totalMinor: 71_300 }, 'total minor: 71300'],
    [{ alternates: [], early: false, note: null }, 'alternates: none, early: no'],
  ])('says %j', (details, text) => {
    expect(detailsInWords(details)).toBe(text);
  });
});
