import { z } from 'zod';
import type { InstrumentSpec, OutputStage, PathPart, PathSpec } from '~/domain/bench/types';

const isoDay = z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the day as 2027-03-09.');
const accuracyUnit = z.enum(['dB', 'percent', 'ppm', 'Hz', 'unit']);
const halfWidth = z.number().finite().nonnegative();
const specHalfWidth = z.object({ halfWidth, unit: accuracyUnit });
const vswr = z.number().finite().min(1, 'A standing wave ratio is 1 or more.');
const coverage = z.number().finite().positive();
const text = (max: number) =>
  z
    .string()
    .min(1)
    .max(max, `At most ${String(max)} characters.`);

/** An instrument's specification as stored with its revision; dB, SI units, ISO days. */
export const instrumentSpecSchema: z.ZodType<InstrumentSpec, z.ZodTypeDef, unknown> = z.object({
  grade: z.enum(['accredited', 'checked', 'unchecked']),
  checkedAgainst: z.string().min(1).nullable(),
  quantities: z.record(z.object({ accuracy: z.array(specHalfWidth), resolution: specHalfWidth.nullable() })),
  linearityDb: halfWidth.nullable(),
  flatnessDb: halfWidth.nullable(),
  vswr: vswr.nullable(),
  ownDistortionDbc: z
    .number()
    .finite()
    .negative('Own distortion is below the carrier: a negative dBc.')
    .nullable(),
  detector: z
    .object({
      dropV: z.number().finite().min(0).max(5, 'The drop of a diode is at most 5 V.'),
      tapRatio: z.number().finite().min(1, 'The line stands at or above the tap.').max(100),
    })
    .nullable()
    .default(null),
  calibration: z
    .object({
      expanded: halfWidth,
      unit: accuracyUnit,
      k: coverage,
      calibratedOn: isoDay.nullable().default(null),
      dueOn: isoDay,
      laboratory: text(120).nullable().default(null),
      certificateNumber: text(60).nullable().default(null),
    })
    .nullable(),
});

const lossTable = z
  .array(z.tuple([z.number().finite().positive(), z.number().finite()]))
  .min(1, 'A part needs at least one row of frequency and loss.')
  .refine(
    (rows) => rows.every((row, index) => index === 0 || row[0] > (rows[index - 1]?.[0] ?? Infinity)),
    'Frequencies of a loss table rise from row to row.',
  );

/** One part of a path: what it loses (dB at Hz), how sure that is, and what it stands. */
export const pathPartSchema: z.ZodType<PathPart, z.ZodTypeDef, unknown> = z.object({
  partNumber: z.string().nullable().default(null),
  name: z.string().min(1),
  loss: lossTable,
  uncertaintyDb: halfWidth,
  k: coverage,
  flatnessDb: halfWidth.nullable(),
  ratingW: z.number().finite().positive().nullable(),
  vswr: vswr.nullable(),
});

/** A path as stored with its revision: ordered parts and which way the signal goes. */
export const pathSpecSchema: z.ZodType<PathSpec, z.ZodTypeDef, unknown> = z.object({
  direction: z.enum(['to_instrument', 'from_generator']).default('to_instrument'),
  parts: z.array(pathPartSchema),
});

/** The output stage as stored with a test plan revision. */
export const outputStageSchema: z.ZodType<OutputStage> = z.object({
  devices: z.number().int().min(1).max(16),
  thetaKPerW: z.number().finite().positive().nullable(),
  duty: z.number().finite().positive().max(1),
  hasSink: z.boolean(),
});
