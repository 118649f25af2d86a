import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseEntry } from './entry';
import { knownQuantity } from './quantities';
import type { EntryOptions } from './entry';

const taken: [string, string, EntryOptions, number, string][] = [
  ['37 dBm', 'rf_power', {}, 5.01187, 'dBm'],
  ['−5,26', 'rf_power', { columnUnit: 'dBm' }, 2.97852e-4, 'dBm'],
  ['5 W', 'rf_power', {}, 5, 'W'],
  ['500mW', 'rf_power', {}, 0.5, 'mW'],
  ['250 µW', 'rf_power', {}, 250e-6, 'µW'],
  ['250 uw', 'rf_power', {}, 250e-6, 'µW'],
  ['15.8114 V rms', 'rf_power', {}, 5, 'Vrms'],
  ['22,3607 Vpk', 'rf_power', {}, 5, 'Vpk'],
  ['44.7214 V p-p', 'rf_power', {}, 5, 'Vpp'],
  ['10 Vpp', 'rf_power', { loadOhm: 25 }, 0.5, 'Vpp'],
  ['9.5 Vdc', 'rf_power', { detector: { dropV: 0.5, tapRatio: 1 } }, 1, 'Vdc'],
  ['612 mA', 'current_key_down', {}, 0.612, 'mA'],
  ['0,612 A', 'current_key_down', {}, 0.612, 'A'],
  ['612', 'current_key_down', { columnUnit: 'mA' }, 0.612, 'mA'],
  ['51', 'harmonic_2', {}, -51, 'dBc'],
  ['-51', 'harmonic_2', {}, -51, 'dBc'],
  ['51,5 dBc', 'spurious', {}, -51.5, 'dBc'],
  ['-56.3 dBm', 'harmonic_2', { refPowerDbm: -5.3 }, -51, 'dBm'],
  ['+38', 'frequency_error', {}, 38, 'Hz'],
  ['−0.041 kHz', 'frequency_error', {}, -41, 'kHz'],
  ['5e-1 W', 'rf_power', {}, 0.5, 'W'],
  ['13.8', 'supply_voltage', {}, 13.8, 'V'],
  ['0.2 µVrms', 'sensitivity', {}, -120.9691, 'µVrms'],
  ['-121', 'sensitivity', {}, -121, 'dBm'],
  ['4 ms', 'keying_rise', {}, 0.004, 'ms'],
  ['46,5', 'case_temperature', {}, 319.65, '°C'],
  ['Yes', 'check', {}, 1, 'yes/no'],
  ['no', 'check', {}, 0, 'yes/no'],
  ['3 kW', 'rf_power', { expectedMax: 5, confirmed: true }, 3000, 'kW'],
];

const refused: [string, string, EntryOptions, RegExp, boolean][] = [
  ['3 kW', 'rf_power', { expectedMax: 5 }, /3000 W is far above the 5\.00 W/, true],
  ['612', 'current_key_down', { columnUnit: 'A' }, /Is it meant/, true],
  ['1,234 W', 'rf_power', {}, /mean 1\.234 or 1234/, false],
  ['1,234.5 W', 'rf_power', {}, /thousands/, false],
  ['1 234 W', 'rf_power', {}, /inside the number/, false],
  ['5', 'rf_power', {}, /Which unit/, false],
  ['5 V', 'rf_power', {}, /which volts/, false],
  ['5 Hz', 'rf_power', {}, /does not fit power/, false],
  ['5 MW', 'rf_power', {}, /millions/, false],
  ['-3', 'rf_power', { columnUnit: 'W' }, /not below zero/, false],
  ['9.5 Vdc', 'rf_power', {}, /drop/, false],
  ['-56 dBm', 'harmonic_2', {}, /power of this band first/, false],
  ['+3', 'harmonic_2', {}, /as strong as the carrier/, true],
  ['-612 mA', 'current_rest', {}, /below zero/, false],
  ['abc', 'rf_power', {}, /does not begin with a number/, false],
  ['', 'rf_power', {}, /empty/, false],
  ['perhaps', 'check', {}, /yes or no/, false],
  ['60', 'efficiency', {}, /computed from other readings/, false],
  ['0.2 V', 'sensitivity', {}, /which volts/, false],
  ['300 °C', 'case_temperature', {}, /Is it meant/, true],
  ['-300 °C', 'case_temperature', { confirmed: true }, /colder/, false],
];

describe('parseEntry', () => {
  it.each(taken)('takes %s as %s', (text, key, options, value, enteredUnit) => {
    const result = parseEntry(text, knownQuantity(key), options);
    expect(result).toMatchObject({ ok: true, enteredUnit });
    if (result.ok) expect(result.value / (value || 1)).toBeCloseTo(value === 0 ? 0 : 1, 4);
  });

  it.each(refused)('does not swallow “%s” as %s', (text, key, options, reason, ask) => {
    const result = parseEntry(text, knownQuantity(key), options);
    expect(result).toMatchObject({ ok: false, ask });
    if (!result.ok) expect(result.reason).toMatch(reason);
  });
});

describe('parseEntry, its laws', () => {
  const keys = fc.constantFrom('rf_power', 'harmonic_2', 'current_rest', 'frequency_error', 'check');

  it('never throws, whatever is typed', () => {
    fc.assert(
      fc.property(
        fc.string(),
        keys,
        (text, key) => typeof parseEntry(text, knownQuantity(key)).ok === 'boolean',
      ),
    );
  });

  it('reads a comma as it reads a point', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 99_999 }), (hundredths) => {
        const text = (hundredths / 100).toFixed(2);
        const options = { columnUnit: 'mA' };
        return (
          JSON.stringify(parseEntry(text, knownQuantity('current_rest'), options)) ===
          JSON.stringify(parseEntry(text.replace('.', ','), knownQuantity('current_rest'), options))
        );
      }),
    );
  });
});
