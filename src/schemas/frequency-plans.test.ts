import { describe, expect, it } from 'vitest';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { frequencyPlanDraft, frequencyPlanSchema, planToColumns } from './frequency-plans';

const plan: FrequencyPlan = {
  oscillators: [
    { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 4e6, highHz: 4.1e6 }] },
    {
      symbol: 'XO',
      name: 'Crystal oscillator',
      ranges: [
        { band: '40m', lowHz: 11.06e6, highHz: 11.06e6 },
        { band: '20m', lowHz: 5.05e6, highHz: 5.05e6 },
      ],
    },
  ],
  stages: [{ symbol: 'LO', name: 'Local oscillator', band: '20m', expression: '2 × XO' }],
  carriers: [
    { band: '40m', expression: 'XO − VFO' },
    { band: '20m', expression: 'LO + VFO' },
  ],
  spacings: [{ kind: 'clock', name: 'Display clock', spacingHz: 32_768 }],
};

/** What is refused, by field. */
function faultsOf(columns: Record<string, readonly string[] | string>): Record<string, string> {
  const parsed = frequencyPlanDraft.safeParse(columns);
  if (parsed.success) return {};
  return Object.fromEntries(parsed.error.issues.map(({ path, message }) => [path.join('.'), message]));
}

describe('the form of a frequency plan', () => {
  it('gives back the plan that it shows', () => {
    expect(frequencyPlanDraft.parse(planToColumns(plan))).toEqual(plan);
    expect(frequencyPlanSchema.parse(plan)).toEqual(plan);
  });

  it('takes a decimal comma, and leaves out rows in which nothing stands', () => {
    const { oscSymbol, oscLowMhz, ...rest } = planToColumns(plan);
    const columns = {
      ...rest,
      oscSymbol: [...oscSymbol, '', ''],
      oscLowMhz: [...oscLowMhz.map((text) => text.replace('.', ',')), '', ''],
      carrierExpression: [...rest.carrierExpression, ''],
    };
    expect(frequencyPlanDraft.parse(columns)).toEqual(plan);
  });

  it('takes single fields, as a form of one row sends them', () => {
    const one = { oscSymbol: 'VFO', oscLowMhz: '7.0', oscHighMhz: '7.1', carrierExpression: 'VFO' };
    expect(frequencyPlanDraft.parse(one).oscillators[0]).toEqual({
      symbol: 'VFO',
      name: 'VFO',
      ranges: [{ band: null, lowHz: 7e6, highHz: 7.1e6 }],
    });
  });

  it('says what is wrong beside the field in which it stands', () => {
    const columns = planToColumns(plan);
    expect(faultsOf({ ...columns, oscLowMhz: ['4', '', 'x'] })).toMatchObject({
      'oscLowMhz.1': 'State the frequency in MHz, above 0.',
      'oscLowMhz.2': 'State the frequency in MHz, above 0.',
    });
    expect(faultsOf({ ...columns, oscHighMhz: ['3', '', ''] })['oscLowMhz.0']).toMatch(/lower end/);
    expect(faultsOf({ ...columns, oscBand: ['', '40m', '40m'] })['oscBand.2']).toMatch(/two ranges on 40 m/);
    expect(faultsOf({ ...columns, carrierExpression: ['XO − BFO', 'LO'] })['carrierExpression.0']).toMatch(
      /There is no BFO in the plan; it has VFO, XO, LO/,
    );
    expect(faultsOf({ ...columns, carrierExpression: ['', ''] })['carrierExpression.0']).toMatch(
      /Say how the carrier/,
    );
    expect(faultsOf({ ...columns, stageExpression: ['2 XO'] })['stageExpression.0']).toMatch(
      /cannot be read/,
    );
    expect(faultsOf({ ...columns, spacingKhz: ['0'] })['spacingKhz.0']).toMatch(/above 0/);
  });
});
