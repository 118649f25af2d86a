import { expect, it } from 'vitest';
import { measuredQuantities, readMeasures } from './measured';
import { ownQuantity, quantityBook } from './quantities';

const book = quantityBook([ownQuantity({ key: 'sidetone', label: 'Sidetone', format: 'frequency' })]);

it('lists what an instrument reads, all products as one, and a works’ own last', () => {
  const keys = measuredQuantities(book).map(({ key }) => key);
  expect(keys.slice(0, 2)).toEqual(['rf_power', 'harmonic']);
  expect(keys.at(-1)).toBe('sidetone');
  for (const key of ['harmonic_2', 'spurious', 'efficiency', 'check']) expect(keys).not.toContain(key);
});

it('reads what was typed, and leaves out what was not', () => {
  const text = (accuracy: string, resolution = '') => ({ accuracy, resolution });
  const read = readMeasures(
    {
      rf_power: text('0.3 dB', '0.01 dB'),
      harmonic: text('', '0.1 dB'),
      current_rest: text(' '),
      sidetone: text('5 Hz'),
    },
    book,
  );
  expect(read.problems).toEqual({});
  expect(read.quantities).toEqual({
    rf_power: { accuracy: [{ halfWidth: 0.3, unit: 'dB' }], resolution: { halfWidth: 0.01, unit: 'dB' } },
    harmonic: { accuracy: [], resolution: { halfWidth: 0.1, unit: 'dB' } },
    sidetone: { accuracy: [{ halfWidth: 5, unit: 'Hz' }], resolution: null },
  });
});

it('says what is wrong beside the field that it is in', () => {
  const { problems } = readMeasures(
    {
      rf_power: { accuracy: '0.3', resolution: '1 mA' },
      efficiency: { accuracy: '1 %', resolution: '' },
    },
    book,
  );
  expect(Object.keys(problems)).toEqual(['accuracy.rf_power', 'resolution.rf_power', 'accuracy.efficiency']);
});
