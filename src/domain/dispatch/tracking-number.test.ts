import { describe, expect, it } from 'vitest';
import { checkTracking } from './tracking-number';

describe('a tracking number', () => {
  it.each([
    ['RR473124829XX', 's10', 'RR473124829XX'],
    [' rr 473 124 829 xx ', 's10', 'RR473124829XX'],
    ['RR473124828XX', 's10_wrong', 'RR473124828XX'],
    ['RR473124892XX', 's10_wrong', 'RR473124892XX'],
    ['1Z 999 QA1', 'other', '1Z999QA1'],
    ['RR47312482XX', 'other', 'RR47312482XX'],
    ['', 'other', ''],
  ])('%j is %s', (text, kind, number) => {
    expect(checkTracking(text)).toMatchObject({ kind, number });
  });

  it('that is mistyped says so', () => {
    expect(checkTracking('RR473124828XX')).toMatchObject({
      reason: 'RR473124828XX is mistyped: its check digit does not fit the digits before it.',
    });
  });
});
