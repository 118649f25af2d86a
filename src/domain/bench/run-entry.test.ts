import { describe, expect, it } from 'vitest';
import { knownQuantity } from './quantities';
import { newestReading, readCell } from './run-entry';
import type { EquippedReading } from './run-entry';
import type { TestPoint } from './types';

const point: TestPoint = {
  id: 1,
  position: 1,
  quantity: knownQuantity('spurious'),
  band: '20m',
  freqHz: 14_060_000,
  lower: null,
  upper: null,
  limitRule: 'spurious',
  decision: 'guarded',
  required: true,
  condition: null,
  supplyV: null,
  method: '',
};
const facts = { readings: [], ratedPowerW: 5, loadOhm: 50 };
const entry = { instrumentRevisionId: 1, pathRevisionId: 2, path: null, detector: null };

describe('a product that is no harmonic', () => {
  it.each([
    ['62 @ 8.93 MHz', -62, 8.93e6],
    ['62,5 dBc @ 8930 kHz', -62.5, 8.93e6],
    ['−62 at 8.93', -62, 8.93e6],
  ])('%s', (text, value, freqHz) => {
    expect(readCell(point, { ...entry, text }, facts)).toMatchObject({ ok: true, value, freqHz });
  });

  it('is asked for its frequency', () => {
    expect(readCell(point, { ...entry, text: '62' }, facts)).toMatchObject({
      ok: false,
      reason: 'Say where the product stands too, as 62 @ 8.93 MHz.',
    });
  });
});

describe('a product in dBm', () => {
  const power: EquippedReading = {
    ...{ testPointId: 2, quantityKey: 'rf_power', band: '20m', freqHz: 14_060_000, voided: false },
    ...{ enteredText: '0', enteredUnit: 'dBm', value: 1e-3, instrument: null, path: null },
    ...{ instrumentRevisionId: 1, pathRevisionId: 2 },
  };
  const harmonic = { ...point, quantity: knownQuantity('harmonic_2') };
  const read = (reading: EquippedReading) =>
    readCell(harmonic, { ...entry, text: '-50 dBm' }, { ...facts, readings: [reading] });

  it('stands under the carrier of its band, read with the same instrument and path', () => {
    expect(read(power)).toMatchObject({ ok: true, value: -50 });
  });

  it.each([
    { band: '30m' as const },
    { voided: true },
    { instrumentRevisionId: 9 },
    { pathRevisionId: null },
  ])('is refused where the carrier is %j', (change) =>
    expect(read({ ...power, ...change })).toMatchObject({ ok: false }),
  );
});

describe('the reading that is corrected', () => {
  it('is the newest that counts', () => {
    const of = (readingNo: number, voided: boolean) => ({ testPointId: 1, readingNo, voided });
    expect(newestReading([of(1, false), of(2, false), of(3, true)], 1)).toMatchObject({ readingNo: 2 });
    expect(newestReading([of(1, true)], 1)).toBeUndefined();
  });
});
