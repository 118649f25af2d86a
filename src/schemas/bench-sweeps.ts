import { z } from 'zod';
import { BAND_KEYS } from '~/domain/bench/bands';
import { figure, orNone } from './bench-equipment';

const band = z.enum(BAND_KEYS as [(typeof BAND_KEYS)[number], ...typeof BAND_KEYS]);

const product = z.object({
  freqHz: z.number(),
  levelDbm: z.number(),
  meterDbc: z.number(),
  unitDbc: z.number(),
  limitDbc: z.number().nullable().default(null),
});

const understood = z.object({
  form: z.enum(['columns', 'matrix', 'row blocks', 'start and stop']).default('columns'),
  points: z.number().int(),
  spanHz: z.tuple([z.number(), z.number()]),
  stepHz: z.number().nullable().default(null),
  rbwHz: z.number().nullable(),
  detector: z.string().nullable(),
  referenceDbm: z.number().nullable().default(null),
  units: z.object({ freq: z.string(), level: z.string().nullable() }),
  columns: z.array(z.string()),
  freqColumn: z.number().int().nullable().default(null),
  levelColumn: z.number().int().nullable().default(null),
  separator: z.string(),
  decimal: z.string(),
  encoding: z.string(),
  levelCalibrated: z.boolean().default(true),
});

const analysis = z.object({
  fundamental: z.object({ freqHz: z.number(), levelDbm: z.number(), unitDbm: z.number() }),
  harmonics: z.array(product.extend({ order: z.number().int(), atMost: z.boolean() })),
  notCovered: z.array(z.object({ order: z.number().int(), reason: z.string() })),
  noiseFloorDbm: z.number(),
  others: z.array(
    product.extend({
      kind: z
        .enum(['leak', 'image', 'harmonic', 'mix', 'supply', 'clock', 'unexplained'])
        .default('unexplained'),
      name: z.string().default('unexplained'),
      order: z.number().int().nullable().default(null),
      predictedHz: z.number().nullable().default(null),
    }),
  ),
});

/** [freqHz, dBc] in order. */
const trace = z.array(z.tuple([z.number(), z.number()]));

/** What is kept of a sweep besides its file; what older ones do not have is filled in. */
export const keptSweepSchema = z.object({ understood, notes: z.array(z.string()), analysis, trace });

/** What the station draws of a sweep, kept or only looked at. */
export type DrawnSweep = Pick<z.output<typeof keptSweepSchema>, 'understood' | 'analysis' | 'trace'>;

/** A sweep as it was understood, before anything of it is kept. */
export const sweepLookSchema = z.object({
  understood,
  notes: z.array(z.string()),
  questions: z.array(
    z.object({
      about: z.enum(['trace', 'frequency unit', 'level unit', 'bandwidth', 'detector', 'carriers']),
      text: z.string(),
      needsValue: z.boolean(),
    }),
  ),
  band: band.nullable(),
  refusal: z.string().nullable(),
  trace,
  analysis: analysis.nullable(),
  readings: z.array(
    z.object({
      testPointId: z.number().int(),
      label: z.string(),
      meterDbc: z.number(),
      unitDbc: z.number(),
      freqHz: z.number().nullable(),
      atMost: z.boolean(),
      name: z.string().nullable(),
    }),
  ),
});

export type SweepLookAnswer = z.output<typeof sweepLookSchema>;

const revisionId = orNone(z.coerce.number().int().positive());
const column = orNone(z.coerce.number().int().nonnegative());

/** What a form leaves empty is not hinted at. */
const choice = <T extends string>(...values: [T, ...T[]]) =>
  z.union([z.literal('').transform(() => null), z.enum(values)]).nullish();

const yes = z.union([
  z.boolean(),
  z.enum(['', 'yes', 'true', 'on', 'false']).transform((text) => text !== '' && text !== 'false'),
]);

/** A sweep file with what a person answers or corrects about it. */
export const sweepLoading = z
  .object({
    file: z.instanceof(File, { message: 'Choose a sweep file.' }),
    /** Empty: told by the carrier. */
    band: z
      .union([z.literal('').transform(() => null), band], { message: 'Choose a band.' })
      .nullable()
      .default(null),
    instrumentRevisionId: revisionId,
    pathRevisionId: revisionId,
    levelUnit: choice('dBm', 'dBµV', 'dBmV', 'dBV', 'W', 'mW', 'V'),
    freqUnit: choice('Hz', 'kHz', 'MHz', 'GHz'),
    /** Counted from 0. */
    freqColumn: column,
    levelColumn: column,
    /** As analysers show it. */
    rbwKhz: orNone(
      figure('The resolution bandwidth is a number of kHz, above 0.', { min: 0.0001, max: 1e6 }),
    ),
    detector: z.string().trim().max(40, 'At most 40 characters.').nullish(),
    /** The person has looked at what was understood and says that it is right. */
    understood: yes.default(false),
    attenuationHeld: yes.default(false),
  })
  .transform(({ levelUnit, freqUnit, freqColumn, levelColumn, rbwKhz, detector, ...rest }) => ({
    ...rest,
    hints: {
      ...(levelUnit ? { levelUnit } : {}),
      ...(freqUnit ? { freqUnit } : {}),
      ...(freqColumn === null ? {} : { freqColumn }),
      ...(levelColumn === null ? {} : { levelColumn }),
      ...(rbwKhz === null ? {} : { rbwHz: rbwKhz * 1e3 }),
      ...(detector ? { detector } : {}),
    },
  }));

/** Largest sweep file, bytes; 200,000 points take about half of it. */
export const MAX_SWEEP_BYTES = 15 * 1024 * 1024;
