import { z } from 'zod';
import { BAND_KEYS } from '~/domain/bench/bands';
import type { BandKey } from '~/domain/bench/types';
import { judgementSchema } from './bench-station';
import { sweepLoading } from './bench-sweeps';

/** So many readings go into one request. */
const MOST_READINGS = 200;

/** `40m`, `40 m` or `40M`; empty for a quantity that belongs to no band. */
const band = z
  .string()
  .transform((text, issue): BandKey | null => {
    const plain = text.replaceAll(/\s/g, '').toLowerCase();
    if (plain === '') return null;
    const known = BAND_KEYS.find((key) => key === plain);
    if (known !== undefined) return known;
    issue.addIssue({ code: 'custom', message: `There is no band ${text}. Bands: ${BAND_KEYS.join(', ')}.` });
    return z.NEVER;
  })
  .nullable()
  .default(null);

const serial = z
  .string({ required_error: 'Say which unit, by its serial number.' })
  .trim()
  .min(1, 'Say which unit, by its serial number.')
  .max(40, 'A serial number is shorter.');

const instrument = z
  .string({ required_error: 'Say which instrument it was read with, by its number.' })
  .trim()
  .min(1, 'Say which instrument it was read with, by its number.')
  .max(20, 'An instrument’s number is shorter.');

const path = z
  .string()
  .trim()
  .max(20, 'A path’s number is shorter.')
  .transform((text) => (text === '' ? null : text))
  .nullable()
  .default(null);

/** What a script may send for yes: `true`, or the word where it sends a form. */
const flag = z
  .union([
    z.boolean(),
    z.enum(['true', 'false', 'yes', 'no']).transform((word) => word === 'true' || word === 'yes'),
  ])
  .default(false);

const frequency = z.coerce
  .number({ message: 'A frequency is a number of Hz.' })
  .finite('A frequency is a number of Hz.')
  .positive('A frequency is above 0 Hz.')
  .optional();

export const wireReading = z.object({
  serial,
  quantity: z
    .string({ required_error: 'Say what was read, by the quantity’s key: rf_power.' })
    .trim()
    .min(1, 'Say what was read, by the quantity’s key: rf_power.')
    .max(40, 'A quantity’s key is shorter.'),
  band,
  text: z
    .string({
      required_error: 'Send what the instrument shows, with its unit: 612 mA.',
      invalid_type_error: 'Send the value as text with its unit: "612 mA".',
    })
    .trim()
    .min(1, 'Send what the instrument shows, with its unit: 612 mA.')
    .max(60, 'At most 60 characters.'),
  instrument,
  path,
  /** Adds a reading instead of correcting the newest. */
  again: flag,
  /** An entry that was asked about is meant. */
  confirmed: flag,
  /** The ratio was shown to hold with 10 dB more attenuation. */
  attenuationHeld: flag,
  /** Of a product that is no harmonic. */
  productFreqHz: frequency,
  /** Which test frequency, where the plan has several on the band. */
  freqHz: frequency,
  /** Version of the reading that the script saw last; 0 where there was none; left out: not checked. */
  version: z.coerce.number().int().nonnegative().optional(),
});

export type WireReading = z.output<typeof wireReading>;

/** One reading, or a list of them: all are recorded, or none. */
export const wireReadings = z.preprocess(
  (body): unknown => (Array.isArray(body) ? body : [body]),
  z
    .array(wireReading)
    .min(1, 'Send at least one reading.')
    .max(MOST_READINGS, `At most ${String(MOST_READINGS)} readings in one request.`),
);

/** The point as it stands with all that was sent. Value and limits are in `unit`, U is in `uUnit`. */
const judgement = judgementSchema.extend({ unit: z.string(), uUnit: z.string().nullable() });

export const recordedReadings = z.object({
  readings: z.array(
    z.object({
      serial: z.string(),
      runNo: z.number().int(),
      quantity: z.string(),
      band: z.string().nullable(),
      readingId: z.number().int(),
      readingNo: z.number().int(),
      version: z.number().int(),
      judgement,
    }),
  ),
});

export type RecordedReadings = z.input<typeof recordedReadings>;

/** A sweep file with the unit, instrument and path as they stand on the bench. */
export const wireSweep = z.intersection(sweepLoading, z.object({ serial, instrument, path }));

export type WireSweep = Pick<z.output<typeof wireSweep>, 'serial' | 'instrument' | 'path'>;

export const recordedSweep = z.object({
  serial: z.string(),
  runNo: z.number().int(),
  sweepId: z.number().int(),
  band: z.string(),
  /** So many readings were taken from it. */
  readings: z.number().int(),
  notes: z.array(z.string()),
  /** Of every point on the band. */
  judgements: z.array(judgement),
});

export type RecordedSweep = z.input<typeof recordedSweep>;
