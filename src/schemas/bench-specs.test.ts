import { describe, expect, it } from 'vitest';
import type { InstrumentSpec, PathSpec } from '~/domain/bench/types';
import { instrumentSpecSchema, pathSpecSchema } from './bench-specs';

const instrument: InstrumentSpec = {
  grade: 'unchecked',
  checkedAgainst: null,
  quantities: { rf_power: { accuracy: [{ halfWidth: 0.5, unit: 'dB' }], resolution: null } },
  linearityDb: null,
  flatnessDb: null,
  vswr: 1.2,
  ownDistortionDbc: -70,
  detector: null,
  calibration: null,
};

const path: PathSpec = {
  direction: 'to_instrument',
  parts: [
    {
      partNumber: null,
      name: 'Pad',
      loss: [
        [1e6, 20],
        [60e6, 20.2],
      ],
      uncertaintyDb: 0.1,
      k: 2,
      flatnessDb: null,
      ratingW: 2,
      vswr: 1.1,
    },
  ],
};
const withPart = (over: object) => ({ parts: path.parts.map((part) => ({ ...part, ...over })) });

describe('stored specifications', () => {
  it('come out of JSON as they went in', () => {
    expect(instrumentSpecSchema.parse(JSON.parse(JSON.stringify(instrument)))).toEqual(instrument);
    expect(pathSpecSchema.parse(JSON.parse(JSON.stringify(path)))).toEqual(path);
  });

  it.each([
    ['a VSWR under 1', { ...instrument, vswr: 0.9 }],
    ['own distortion over the carrier', { ...instrument, ownDistortionDbc: 70 }],
    [
      'a day that is none',
      {
        ...instrument,
        calibration: {
          expanded: 0.1,
          unit: 'dB',
          k: 2,
          calibratedOn: null,
          laboratory: null,
          certificateNumber: null,
          dueOn: 'soon',
        },
      },
    ],
    ['a grade that is none', { ...instrument, grade: 'good' }],
  ])('an instrument with %s is refused', (_, value) => {
    expect(instrumentSpecSchema.safeParse(value).success).toBe(false);
  });

  it.each([
    ['an empty table', { loss: [] }],
    [
      'a falling table',
      {
        loss: [
          [2e6, 20],
          [1e6, 20],
        ],
      },
    ],
    ['no name', { name: '' }],
    ['k of zero', { k: 0 }],
  ])('a path part with %s is refused', (_, over) => {
    expect(pathSpecSchema.safeParse(withPart(over)).success).toBe(false);
  });
});
