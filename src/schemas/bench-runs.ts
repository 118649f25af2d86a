import { z } from 'zod';

const revisionId = z.coerce.number().int().positive();
const chosenRevision = z
  .union([z.literal('').transform(() => null), revisionId])
  .nullable()
  .default(null);

const optionalText = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `At most ${max} characters.`)
    .transform((text) => (text === '' ? null : text))
    .nullable();

const optionalNumber = (sentence: string) =>
  z
    .union([z.literal('').transform(() => null), z.coerce.number({ message: sentence }).finite(sentence)])
    .nullable();

/** What is typed into a cell of a run. */
export const readingEntry = z.object({
  testPointId: z.coerce.number().int().positive(),
  text: z.string().trim().min(1, 'The cell is empty.').max(60, 'At most 60 characters.'),
  /** The unit that the column remembers. */
  columnUnit: z.string().max(12).optional(),
  /** Adds a reading instead of correcting the newest. */
  again: z.coerce.boolean().default(false),
  instrumentRevisionId: chosenRevision,
  pathRevisionId: chosenRevision,
  /** The person says that an entry that was asked about is meant. */
  confirmed: z.coerce.boolean().default(false),
  /** The ratio was shown to hold with 10 dB more attenuation. */
  attenuationHeld: z.coerce.boolean().default(false),
  /** Version of the reading that the person saw; 0 where the cell was empty; left out: not checked. */
  version: z.coerce.number().int().nonnegative().optional(),
});

export type ReadingEntry = z.infer<typeof readingEntry>;

export const readingVoiding = z.object({
  reason: z
    .string()
    .trim()
    .min(1, 'Say why the reading does not count: wrong band, lead off.')
    .max(300, 'At most 300 characters.'),
});

export const concessionEntry = z.object({
  testPointId: z.coerce.number().int(),
  reason: z
    .string()
    .trim()
    .min(1, 'Say why it may go: the certificate prints it.')
    .max(500, 'At most 500 characters.'),
});

export const runConditions = z.object({
  supplyV: optionalNumber('The supply is a number of volts.').refine(
    (volts) => volts === null || (volts > 0 && volts <= 100),
    'The supply is above 0 V and at most 100 V.',
  ),
  ambientC: optionalNumber('The ambient temperature is a number of °C.').refine(
    (degrees) => degrees === null || (degrees >= -40 && degrees <= 80),
    'The ambient temperature is between −40 °C and 80 °C.',
  ),
  firmwareVersion: optionalText(40),
  /** Name of the adjustment and what it was set to. */
  alignment: z
    .record(z.string().trim().min(1).max(60), z.string().trim().max(60))
    .refine((values) => Object.keys(values).length <= 40, 'At most 40 alignment values.'),
  version: z.coerce.number().int().positive().optional(),
});

export type RunConditions = z.infer<typeof runConditions>;
