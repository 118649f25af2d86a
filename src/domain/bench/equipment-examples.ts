import type { InstrumentSpec, PathSpec } from './types';

const instrument: InstrumentSpec = {
  grade: 'unchecked',
  checkedAgainst: null,
  quantities: {
    rf_power: { accuracy: [{ halfWidth: 0.5, unit: 'dB' }], resolution: { halfWidth: 0.01, unit: 'dB' } },
  },
  linearityDb: null,
  flatnessDb: null,
  vswr: null,
  ownDistortionDbc: null,
  calibration: null,
};

const path: PathSpec = {
  parts: [
    {
      name: 'Dummy load with tap',
      loss: [
        [1_000_000, 40],
        [200_000_000, 40],
      ],
      uncertaintyDb: 0.3,
      k: 2,
      flatnessDb: null,
      ratingW: 20,
      vswr: null,
    },
  ],
};

/** Where a new instrument's specification begins. */
export const newInstrumentText = JSON.stringify(instrument, null, 2);

/** Where a new path begins. */
export const newPathText = JSON.stringify(path, null, 2);
