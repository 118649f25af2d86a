import { describe, expect, it } from 'vitest';
import { checkStepEntry, stageAfterSteps } from './steps';

const boards = (done: boolean) => ({ stage: 'boards' as const, done });
const align = (done: boolean) => ({ stage: 'align' as const, done });

describe('stageAfterSteps', () => {
  it.each([
    { at: 'kit', steps: [], then: 'kit' },
    { at: 'boards', steps: [boards(true), boards(false)], then: 'boards' },
    { at: 'boards', steps: [boards(true), align(false)], then: 'align' },
    { at: 'boards', steps: [boards(true)], then: 'final_test' },
    { at: 'align', steps: [boards(true), align(true)], then: 'final_test' },
    { at: 'final_test', steps: [boards(false)], then: 'final_test' },
    { at: 'gone', steps: [], then: 'gone' },
  ] as const)('from $at to $then', ({ at, steps, then }) => {
    expect(stageAfterSteps(at, steps)).toBe(then);
  });
});

describe('checkStepEntry', () => {
  const current = { label: 'the quiescent current', unit: 'mA', lower: 55, upper: 65 };
  it.each([
    { typed: '61', answer: { ok: true, entry: '61 mA', value: 61 } },
    { typed: ' 61,5 mA', answer: { ok: true, entry: '61,5 mA', value: 61.5 } },
    { typed: '55', answer: { ok: true, entry: '55 mA', value: 55 } },
    { typed: '65', answer: { ok: true, entry: '65 mA', value: 65 } },
    { typed: '', answer: { ok: false, reason: 'Enter the quiescent current.' } },
    { typed: 'mA', answer: { ok: false, reason: '“mA” is not a number of mA.' } },
    {
      typed: '54.9',
      answer: { ok: false, reason: '54.9 mA is below 55 mA. Put it right before the step is done.' },
    },
    {
      typed: '71',
      answer: { ok: false, reason: '71 mA is over 65 mA. Put it right before the step is done.' },
    },
  ])('“$typed”', ({ typed, answer }) => {
    expect(checkStepEntry(current, typed)).toEqual(answer);
  });

  it('takes a remark where nothing is asked for, and none too', () => {
    expect(checkStepEntry(null, ' photo taken ')).toEqual({ ok: true, entry: 'photo taken', value: null });
    expect(checkStepEntry(null, undefined)).toEqual({ ok: true, entry: null, value: null });
  });

  it('reads a minus as it is printed', () => {
    const offset = { label: 'the offset', unit: 'Hz', lower: -50, upper: 50 };
    expect(checkStepEntry(offset, '−12')).toEqual({ ok: true, entry: '−12 Hz', value: -12 });
  });
});
