import type { AccuracyUnit, InstrumentCalibration, InstrumentSpec } from '~/domain/bench/types';
import { createInstrument } from '~/server/services/bench/create-instrument';
import { createPath } from '~/server/services/bench/create-path';
import { createPathPart } from '~/server/services/bench/create-path-part';
import type { WriteContext } from '~/server/write';
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
  detector: null,
  calibration: null,
};

function calibrated(
  expanded: number,
  unit: AccuracyUnit,
  { on, due, no }: { on: string; due: string; no: string },
): InstrumentCalibration {
  const laboratory = 'Northmoor Metrology';
  return { expanded, unit, k: 2, calibratedOn: on, dueOn: due, laboratory, certificateNumber: no };
}

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
        calibration: calibrated(0.09, 'dB', {
          on: calendar.day(-151),
          due: calendar.day(214),
          no: 'NM-7731',
        }),
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
        calibration: calibrated(0.4, 'dB', { on: calendar.day(-243), due: calendar.day(122), no: 'NM-7458' }),
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
        calibration: calibrated(0.8, 'dB', { on: calendar.day(-768), due: calendar.day(-38), no: 'NM-5102' }),
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

/** Losses as the works has measured them. */
const demoParts = [
  {
    number: 'L-50',
    name: 'Dummy load with 40 dB tap, 50 W',
    lossTable: '1 MHz 40.05\n10 MHz 40.02\n30 MHz 40\n60 MHz 39.96\n150 MHz 39.8',
    ...{ uncertaintyDb: 0.1, k: 2, flatnessDb: 0.12, ratingW: 50, vswr: 1.05 },
  },
  {
    number: 'C-60',
    name: 'Cable, 60 cm',
    lossTable: '1 MHz 0.02\n10 MHz 0.05\n30 MHz 0.09\n150 MHz 0.21',
    ...{ uncertaintyDb: 0.03, k: 2, flatnessDb: 0.03, ratingW: null, vswr: null },
  },
  {
    number: 'A-10',
    name: '10 dB pad, 2 W',
    lossTable: '1 MHz 10.01\n150 MHz 10.06',
    ...{ uncertaintyDb: 0.06, k: 2, flatnessDb: 0.05, ratingW: 2, vswr: 1.08 },
  },
];

const demoPaths = [
  { number: 'T-1', name: '40 dB tap and cable', parts: ['L-50', 'C-60'] },
  { number: 'T-2', name: '40 dB tap, cable and 10 dB pad', parts: ['L-50', 'C-60', 'A-10'] },
];

/** Enters the bench's instruments, and the paths with the parts that they are built from. */
export async function addEquipment(w: WriteContext, calendar: Calendar): Promise<void> {
  for (const instrument of demoInstruments(calendar)) await createInstrument(instrument, w);
  for (const part of demoParts) await createPathPart(part, w);
  for (const path of demoPaths) await createPath({ ...path, direction: 'to_instrument' }, w);
}
