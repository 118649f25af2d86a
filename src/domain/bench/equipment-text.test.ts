import { describe, expect, it } from 'vitest';
import { calibrationWords, gradeText, lossSpanText, lossText, partsText, ratingText } from './equipment-text';
import type { InstrumentSpec, PathPart, PathSpec } from './types';

const spec = (change: Partial<InstrumentSpec>): InstrumentSpec => ({
  ...{ grade: 'unchecked', checkedAgainst: null, quantities: {}, linearityDb: null, flatnessDb: null },
  ...{ vswr: null, ownDistortionDbc: null, detector: null, calibration: null },
  ...change,
});

const part = (name: string, loss: [number, number][], ratingW: number | null = null): PathPart => ({
  ...{ partNumber: null, name, loss, uncertaintyDb: 0.1, k: 2, flatnessDb: null, ratingW, vswr: null },
});
const path = (...parts: PathPart[]): PathSpec => ({ direction: 'to_instrument', parts });

describe('an instrument in words', () => {
  it.each([
    [{ grade: 'accredited' }, 'accredited'],
    [{ grade: 'unchecked' }, 'unchecked: specification alone'],
    [{ grade: 'checked', checkedAgainst: 'MM-1, 2027-03-01' }, 'checked against MM-1, 1 March 2027'],
    [{ grade: 'checked', checkedAgainst: 'MM-1, 2027-02-31' }, 'checked against MM-1, 2027-02-31'],
  ] as const)('has its grade: %j', (change, text) => {
    expect(gradeText(spec(change))).toBe(text);
  });

  it('says what its calibration is worth and whose it is', () => {
    expect(calibrationWords(spec({}))).toBe('none');
    const calibration = {
      ...{ expanded: 0.09, unit: 'dB' as const, k: 2, calibratedOn: null, dueOn: '2027-12-31' },
      ...{ laboratory: 'Northmoor', certificateNumber: '4711' },
    };
    expect(calibrationWords(spec({ calibration }))).toBe('±0.09 dB (k = 2), by Northmoor, no. 4711');
  });
});

describe('a path in words', () => {
  const tap = part(
    'Tap, 50 W',
    [
      [1e6, 40],
      [100e6, 40.5],
    ],
    50,
  );
  const pad = part('Pad', [
    [10e6, 10],
    [100e6, 10],
  ]);

  it('names its parts so that they can be told apart', () => {
    expect(partsText(path(tap, pad))).toBe('Tap, 50 W; Pad');
    expect(partsText(path())).toBe('straight in');
  });

  it('gives the loss where all its tables begin', () => {
    expect(lossText(path(tap, pad))).toBe('50.3 dB at 10 MHz');
    expect(lossText(path())).toBe('0 dB');
    expect(lossText(path(tap, part('Beyond', [[1e9, 1]])))).toBe('none: the tables do not meet');
  });

  it('says what a part loses over its span, and what it stands', () => {
    expect(lossSpanText(tap)).toBe('40.00 to 40.50 dB, 1 MHz to 100 MHz');
    expect(lossSpanText(pad)).toBe('10.00 dB, 10 MHz to 100 MHz');
    expect([ratingText(tap), ratingText(pad)]).toEqual(['50.0 W', 'not stated']);
  });
});
