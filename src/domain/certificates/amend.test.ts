import { describe, expect, it } from 'vitest';
import { buildStatement } from '../../../tests/pdf/build-statement';
import { amendStatement, correctableFacts } from './amend';
import { signedText } from './canonical';

const issue = {
  reason: 'The firmware was misread.',
  code: '7F3K92QDHM0V',
  checkUrl: 'https://works.example/certificates/7F3K92QDHM0V',
  issuedOn: '2027-03-20',
  issuedBy: 'Mara Quill',
  salt: 'ff'.repeat(16),
  digestBuyer: () => 'ab'.repeat(32),
};

function amend(before = buildStatement(), change: Partial<ReturnType<typeof correctableFacts>> = {}) {
  return amendStatement(before, { ...correctableFacts(before), ...change }, issue);
}

describe('an amendment', () => {
  it('bears the next letter and names the one that it replaces, why, and what differs', () => {
    const amended = amend(undefined, { firmware: '1.5', ambient: '' });
    expect(amended).toMatchObject({
      ok: true,
      statement: {
        number: 'TC-2027-00412',
        letter: 'A',
        issuedOn: '2027-03-20',
        issuedBy: 'Mara Quill',
        unit: { firmware: '1.5' },
        replaces: {
          number: 'TC-2027-00412',
          reason: 'The firmware was misread.',
          changes: ['Firmware: “1.4” before, now “1.5”.', 'Ambient: “21 °C” before, now nothing.'],
        },
      },
    });
  });

  // ISO/IEC 17025:2017, 7.8.8.3: a new report references the original that it replaces.
  it('names its immediate predecessor when it is amended again', () => {
    const first = amend(undefined, { firmware: '1.5' });
    if (!first.ok) throw new Error(first.reason);
    const second = amend(first.statement, { bomRevision: 'E' });
    expect(second).toMatchObject({
      statement: { letter: 'B', replaces: { number: 'TC-2027-00412A' }, unit: { firmware: '1.5' } },
    });
  });

  it('takes the readings, their verdicts, the instruments and the rule over as they stand', () => {
    const before = buildStatement();
    const amended = amend(before, { deviations: ['Keyed by hand.'], place: 'at a fair' });
    if (!amended.ok) throw new Error(amended.reason);
    const { points, instruments, path, testedAt, testedBy, result, computationVersion, testPlan } =
      amended.statement;
    expect({ points, instruments, path, testedAt, testedBy, result, computationVersion, testPlan }).toEqual({
      ...{ points: before.points, instruments: before.instruments, path: before.path },
      ...{ testedAt: before.testedAt, testedBy: before.testedBy, result: before.result },
      ...{ computationVersion: before.computationVersion, testPlan: before.testPlan },
    });
    expect(amended.statement.conditions).toEqual(before.conditions);
  });

  it('says of a call sign that it differs, and keeps it out of what is public', () => {
    const amended = amend(undefined, { callSign: 'Q0ABD' });
    if (!amended.ok) throw new Error(amended.reason);
    expect(amended.statement.replaces?.changes).toEqual(['The buyer’s call sign.']);
    expect(amended.statement.buyer).toEqual({ callSign: 'Q0ABD', orderNumber: '1093', salt: issue.salt });
    expect(amended.statement.buyerDigest).toBe('ab'.repeat(32));
    expect(signedText(amended.statement)).not.toMatch(/Q0AB[CD]/u);
  });

  it('gives a unit without a buyer none', () => {
    const amended = amend(buildStatement({ buyer: null, buyerDigest: null }), {
      ...{ callSign: null, options: 'wide filter' },
    });
    expect(amended).toMatchObject({ ok: true, statement: { buyer: null, buyerDigest: null } });
  });

  it('is refused where nothing differs', () => {
    const amended = amend();
    expect(amended.ok ? '' : amended.reason).toContain('Nothing differs');
  });
});
