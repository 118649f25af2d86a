import { describe, expect, it } from 'vitest';
import {
  formatAtMeter,
  formatFrequency,
  formatNumber,
  formatUncertainty,
  formatValue,
  formatWithU,
} from './format';
import { knownQuantity } from './quantities';

describe('formatValue', () => {
  it.each([
    [3.1249, 'rf_power', '3.12 W'],
    [9.996, 'rf_power', '10.0 W'],
    [0.2534, 'rf_power', '0.253 W'],
    [123.4, 'rf_power', '123 W'],
    [3000, 'rf_power', '3000 W'],
    [250.6e-6, 'rf_power', '251 µW'],
    [0.00512, 'rf_power', '5.12 mW'],
    [-51.12, 'harmonic_2', '\u221251.1 dBc'],
    [-0.02, 'harmonic_2', '0.0 dBc'],
    [0.612, 'current_key_down', '612 mA'],
    [1.5, 'current_rest', '1.50 A'],
    [0.9996, 'current_rest', '1.00 A'],
    [38.2, 'frequency_error', '+38 Hz'],
    [-41, 'frequency_error', '\u221241 Hz'],
    [0.2, 'frequency_error', '0 Hz'],
    [13.8, 'supply_voltage', '13.80 V'],
    [-121.04, 'sensitivity', '\u2212121.0 dBm'],
    [0.004, 'keying_rise', '4.00 ms'],
    [319.65, 'case_temperature', '46.5 °C'],
    [0.5952, 'efficiency', '59.5 %'],
    [0.31, 'power_drop', '0.3 dB'],
    [1, 'check', 'yes'],
    [0, 'check', 'no'],
  ])('%d of %s is %s', (value, key, text) => {
    expect(formatValue(value, knownQuantity(key))).toBe(text);
  });

  it('shows a power at the meter in dBm', () => {
    expect(formatAtMeter(2.97852e-4, knownQuantity('rf_power'))).toBe('\u22125.26 dBm');
    expect(formatAtMeter(-51.04, knownQuantity('harmonic_2'))).toBe('\u221251.0 dBc');
  });
});

describe('other numbers', () => {
  it.each([
    [7.03e6, '7.03 MHz'],
    [108695.652, '108.696 kHz'],
    [300, '300 Hz'],
    [14e6, '14 MHz'],
    [100e6, '100 MHz'],
    [1.22, '1.2 Hz'],
  ])('%d Hz is %s', (freqHz, text) => {
    expect(formatFrequency(freqHz)).toBe(text);
  });

  it('has no negative zero and gives an uncertainty two figures', () => {
    expect(formatNumber(-0.001, 1)).toBe('0.0');
    expect(formatWithU(-51.12, 0.88)).toBe('\u221251.12 ± 0.88');
    expect(formatWithU(612.4, 14)).toBe('612 ± 14');
  });
});

describe('formatUncertainty', () => {
  it.each([
    [0.87, 'dB', '0.9 dB'],
    [0.00563, 'A', '5.6 mA'],
    [0.000395, 'A', '0.40 mA'],
    [0.0142, 'A', '14 mA'],
    [1.25, 'A', '1.3 A'],
    [2.04, 'Hz', '2.0 Hz'],
    [12.4, 'Hz', '12 Hz'],
    [0.0123, 'V', '12 mV'],
    [0.00021, 's', '0.21 ms'],
    [1.7, 'K', '1.7 K'],
    [0.42, 'W', '420 mW'],
    [0.25, '1', '0.25'],
  ] as const)('%d %s is %s', (uncertainty, unit, text) => {
    expect(formatUncertainty(uncertainty, unit, 'number')).toBe(text);
  });
});

it('states the uncertainty of a share in %', () => {
  expect(formatUncertainty(0.0123, '1', 'percent')).toBe('1.2 %');
});
