import type { InstrumentSpec, PathSpec } from '~/domain/bench/types';
import { instrumentRevisions, instruments, pathRevisions, paths } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';
import type { Calendar } from './calendar';

interface DemoInstrument {
  number: string;
  name: string;
  spec: InstrumentSpec;
}

const plain = {
  checkedAgainst: null,
  linearityDb: null,
  flatnessDb: null,
  vswr: null,
  ownDistortionDbc: null,
  calibration: null,
};

function demoInstruments(calendar: Calendar): DemoInstrument[] {
  return [
    {
      number: 'PM-2',
      name: 'Power meter with diode sensor',
      spec: {
        ...plain,
        grade: 'accredited',
        quantities: {
          rf_power: {
            accuracy: [{ halfWidth: 0.12, unit: 'dB' }],
            resolution: { halfWidth: 0.01, unit: 'dB' },
          },
        },
        vswr: 1.12,
        calibration: { expanded: 0.09, unit: 'dB', k: 2, dueOn: calendar.day(214) },
      },
    },
    {
      number: 'SA-1',
      name: 'Spectrum analyser to 1.5 GHz',
      spec: {
        ...plain,
        grade: 'accredited',
        quantities: {
          harmonic: {
            accuracy: [{ halfWidth: 0.6, unit: 'dB' }],
            resolution: { halfWidth: 0.1, unit: 'dB' },
          },
          rf_power: {
            accuracy: [{ halfWidth: 0.9, unit: 'dB' }],
            resolution: { halfWidth: 0.1, unit: 'dB' },
          },
        },
        linearityDb: 0.35,
        flatnessDb: 0.45,
        vswr: 1.2,
        ownDistortionDbc: -82,
        calibration: { expanded: 0.4, unit: 'dB', k: 2, dueOn: calendar.day(122) },
      },
    },
    {
      number: 'MM-4',
      name: 'Multimeter, 4½ digits',
      spec: {
        ...plain,
        grade: 'checked',
        checkedAgainst: `MM-1, ${calendar.day(-96)}`,
        quantities: {
          current_rest: {
            accuracy: [
              { halfWidth: 0.5, unit: 'percent' },
              { halfWidth: 0.0002, unit: 'unit' },
            ],
            resolution: { halfWidth: 0.0001, unit: 'unit' },
          },
          current_key_down: {
            accuracy: [
              { halfWidth: 0.8, unit: 'percent' },
              { halfWidth: 0.001, unit: 'unit' },
            ],
            resolution: { halfWidth: 0.001, unit: 'unit' },
          },
        },
      },
    },
    {
      number: 'FC-1',
      name: 'Frequency counter with oven',
      spec: {
        ...plain,
        grade: 'checked',
        checkedAgainst: `a satellite-disciplined reference, ${calendar.day(-61)}`,
        quantities: {
          frequency_error: {
            accuracy: [{ halfWidth: 0.2, unit: 'ppm' }],
            resolution: { halfWidth: 1, unit: 'Hz' },
          },
        },
      },
    },
    {
      number: 'SA-0',
      name: 'Spectrum analyser, the old one',
      spec: {
        ...plain,
        grade: 'accredited',
        quantities: {
          harmonic: {
            accuracy: [{ halfWidth: 1.5, unit: 'dB' }],
            resolution: { halfWidth: 0.1, unit: 'dB' },
          },
        },
        linearityDb: 1,
        flatnessDb: 1.2,
        vswr: 1.4,
        ownDistortionDbc: -68,
        calibration: { expanded: 0.8, unit: 'dB', k: 2, dueOn: calendar.day(-38) },
      },
    },
    {
      number: 'PM-0',
      name: 'Pocket power meter',
      spec: {
        ...plain,
        grade: 'unchecked',
        quantities: { rf_power: { accuracy: [{ halfWidth: 5, unit: 'percent' }], resolution: null } },
      },
    },
  ];
}

const tap: PathSpec = {
  parts: [
    {
      name: 'Dummy load with 40 dB tap, 50 W',
      loss: [
        [1e6, 40.05],
        [10e6, 40.02],
        [30e6, 40.0],
        [60e6, 39.96],
        [150e6, 39.8],
      ],
      ...{ uncertaintyDb: 0.1, k: 2, flatnessDb: 0.12, ratingW: 50, vswr: 1.05 },
    },
    {
      name: 'Cable, 60 cm',
      loss: [
        [1e6, 0.02],
        [10e6, 0.05],
        [30e6, 0.09],
        [150e6, 0.21],
      ],
      ...{ uncertaintyDb: 0.03, k: 2, flatnessDb: 0.03, ratingW: null, vswr: null },
    },
  ],
};

const demoPaths: readonly { number: string; name: string; spec: PathSpec }[] = [
  { number: 'T-1', name: '40 dB tap and cable', spec: tap },
  {
    number: 'T-2',
    name: '40 dB tap, cable and 10 dB pad',
    spec: {
      parts: [
        ...tap.parts,
        {
          name: '10 dB pad, 2 W',
          loss: [
            [1e6, 10.01],
            [150e6, 10.06],
          ],
          ...{ uncertaintyDb: 0.06, k: 2, flatnessDb: 0.05, ratingW: 2, vswr: 1.08 },
        },
      ],
    },
  },
];

/** Enters the bench's instruments and paths, each with its first revision. */
export async function addEquipment(tx: Tx, calendar: Calendar, createdAt: Date): Promise<void> {
  for (const { spec, ...instrument } of demoInstruments(calendar)) {
    const [{ insertId: instrumentId }] = await tx.insert(instruments).values(instrument);
    await tx.insert(instrumentRevisions).values({ instrumentId, revision: 1, spec, createdAt });
  }
  for (const { spec, ...path } of demoPaths) {
    const [{ insertId: pathId }] = await tx.insert(paths).values(path);
    await tx.insert(pathRevisions).values({ pathId, revision: 1, spec, createdAt });
  }
}
