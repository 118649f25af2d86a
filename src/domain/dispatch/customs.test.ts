import { describe, expect, it } from 'vitest';
import { customsLines, formatWeight } from './customs';

const rig = {
  description: 'Amateur radio transceiver',
  hsCode: '8525.60',
  originCountry: 'IE',
  netWeightG: 620,
  valueMinor: 43700,
  currency: 'EUR',
};

describe('what customs is told', () => {
  it('is nothing inside the country', () => {
    expect(customsLines([rig], 'IE', 'IE')).toBeNull();
  });

  it('is one line for what is alike, with the weight and the value of all', () => {
    expect(customsLines([rig, rig, { ...rig, valueMinor: 50000 }], 'IE', 'US')).toEqual([
      { ...rig, quantity: 2, netWeightG: 1240, valueMinor: 87400 },
      { ...rig, quantity: 1, valueMinor: 50000 },
    ]);
  });

  it('weighs to the next 10 g above', () => {
    expect([620, 621, 1240, 5].map(formatWeight)).toEqual([
      '0.62\u00a0kg',
      '0.63\u00a0kg',
      '1.24\u00a0kg',
      '0.01\u00a0kg',
    ]);
  });
});
