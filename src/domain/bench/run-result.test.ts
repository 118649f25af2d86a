import { describe, expect, it } from 'vitest';
import { runResult } from './run-result';
import type { RunPoint } from './run-result';
import type { Verdict } from './types';

const point = (verdict: Verdict, over: Partial<RunPoint> = {}): RunPoint => ({
  label: `20 m, ${verdict}`,
  required: true,
  verdict,
  stopped: null,
  isConceded: false,
  ...over,
});

describe('runResult', () => {
  it.each<[string, RunPoint[], string, boolean]>([
    ['all pass', [point('pass'), point('pass')], 'passed', true],
    ['a required one too close', [point('pass'), point('too_close')], 'undecided', true],
    ['an optional one too close', [point('pass'), point('too_close', { required: false })], 'passed', true],
    ['one not run', [point('pass'), point('not_run')], 'incomplete', false],
    ['an optional one not run', [point('pass'), point('not_run', { required: false })], 'passed', true],
    ['one failed and the rest not run', [point('fail'), point('not_run')], 'failed', true],
    ['an optional one failed', [point('pass'), point('fail', { required: false })], 'failed', true],
    ['too close beside not run', [point('too_close'), point('not_run')], 'incomplete', false],
    [
      'a failed one that is conceded',
      [point('pass'), point('fail', { isConceded: true })],
      'passed_by_concession',
      true,
    ],
    [
      'one that is too close and conceded',
      [point('too_close', { isConceded: true })],
      'passed_by_concession',
      true,
    ],
    ['a concession that was not needed', [point('pass', { isConceded: true })], 'passed', true],
    ['one conceded and another failed', [point('fail'), point('fail', { isConceded: true })], 'failed', true],
    [
      'one conceded and another not run',
      [point('fail', { isConceded: true }), point('not_run')],
      'incomplete',
      false,
    ],
    ['no point at all', [], 'incomplete', false],
  ])('%s', (_, points, result, canClose) => {
    expect(runResult(points)).toMatchObject({ result, canClose });
  });

  it('says what is missing and why a reading has no verdict', () => {
    const { why } = runResult([point('not_run'), point('not_run', { stopped: 'Measure the power first.' })]);
    expect(why).toEqual(['20 m, not_run has no reading.', '20 m, not_run: Measure the power first.']);
  });
});
