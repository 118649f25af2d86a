import { z } from 'zod';
import type { InstrumentSpec, PathSpec } from '~/domain/bench/types';

const isoDay = z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the day as 2027-03-09.');
const accuracyUnit = z.enum(['dB', 'percent', 'ppm', 'Hz', 'unit']);
const halfWidth = z.number().finite().nonnegative();
const specHalfWidth = z.object({ halfWidth, unit: accuracyUnit });
const vswr = z.number().finite().min(1, 'A standing wave ratio is 1 or more.');
const coverage = z.number().finite().positive();

/** An instrument's specification as stored with its revision; dB, SI units, ISO days. */
export const instrumentSpecSchema: z.ZodType<InstrumentSpec> = z.object({
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
  calibration: z.object({ expanded: halfWidth, unit: accuracyUnit, k: coverage, dueOn: isoDay }).nullable(),
});

const lossTable = z
  .array(z.tuple([z.number().finite().positive(), z.number().finite()]))
  .min(1, 'A part needs at least one row of frequency and loss.')
  .refine(
    (rows) => rows.every((row, index) => index === 0 || row[0] > (rows[index - 1]?.[0] ?? Infinity)),
    'Frequencies of a loss table rise from row to row.',
  );

/** A path as stored with its revision: ordered parts, losses in dB at Hz. */
export const pathSpecSchema: z.ZodType<PathSpec> = z.object({
  parts: z.array(
    z.object({
      name: z.string().min(1),
      loss: lossTable,
      uncertaintyDb: halfWidth,
      k: coverage,
      flatnessDb: halfWidth.nullable(),
      ratingW: z.number().finite().positive().nullable(),
      vswr: vswr.nullable(),
    }),
  ),
});
