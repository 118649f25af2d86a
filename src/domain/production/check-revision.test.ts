import { quantityBook } from '~/domain/bench/quantities';
import { describe, expect, it } from 'vitest';
import { checkBuildSheet, checkTestPlan } from './check-revision';

const groups = [
  {
    key: 'filter',
    label: 'Filter',
    min: 0,
    max: 1,
    options: [{ key: 'filter.narrow', label: 'Narrow filter', priceMinor: 0, needs: [], excludes: [] }],
  },
];
const step = { position: 1, title: 'Fit the coils', condition: null };
const point = {
  position: 1,
  quantityKey: 'rf_power',
  lower: 4.5,
  upper: null,
  limitRule: 'fixed' as const,
  condition: null,
};

describe('checkBuildSheet', () => {
  it('passes steps whose conditions name options of the model', () => {
    expect(checkBuildSheet([step, { ...step, condition: 'not filter.narrow' }], groups)).toEqual({
      ok: true,
    });
  });
  it.each([
    { steps: [], reasons: ['The build sheet has no step.'] },
    {
      steps: [{ ...step, condition: 'filter.wide' }],
      reasons: ['Step 1 (Fit the coils): the model has no option “filter.wide”.'],
    },
  ])('$reasons', ({ steps, reasons }) => {
    expect(checkBuildSheet(steps, groups)).toEqual({ ok: false, reasons });
  });
  it('refuses a condition that cannot be read', () => {
    expect(checkBuildSheet([{ ...step, condition: '(filter.narrow' }], groups)).toMatchObject({ ok: false });
  });
});

describe('checkTestPlan', () => {
  it('passes a fixed limit, and a legal one without any of its own', () => {
    const legal = { ...point, quantityKey: 'spurious', lower: null, limitRule: 'spurious' as const };
    expect(checkTestPlan([point, legal], groups, quantityBook())).toEqual({ ok: true });
  });
  it.each([
    { points: [], reasons: ['The test plan has no point.'] },
    { points: [{ ...point, lower: null }], reasons: ['Point 1 has no limit.'] },
    { points: [{ ...point, upper: 4 }], reasons: ['Point 1: the lower limit is above the upper one.'] },
    { points: [{ ...point, quantityKey: 'taste' }], reasons: ['Point 1: there is no quantity “taste”.'] },
  ])('$reasons', ({ points, reasons }) => {
    expect(checkTestPlan(points, groups, quantityBook())).toEqual({ ok: false, reasons });
  });
});
