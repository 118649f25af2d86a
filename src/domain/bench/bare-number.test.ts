import { expect, test } from 'vitest';
import { isBareNumber } from './bare-number';

test.each(['612', '−51.2', '-51,2', ' +3 ', '1e-3', '2.5E+6', '1 000'])('%j is one', (text) => {
  expect(isBareNumber(text)).toBe(true);
});

test.each(['612 mA', '-51 dBc', '5W', '3 e', 'yes', '62 @ 8.93 MHz', '20 %', '1e3 Hz'])(
  '%j is none',
  (text) => {
    expect(isBareNumber(text)).toBe(false);
  },
);
