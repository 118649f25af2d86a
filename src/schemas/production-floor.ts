import { z } from 'zod';

const optional = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `At most ${max} characters.`)
    .transform((text) => (text === '' ? undefined : text))
    .optional();

const reason = z.string().trim().min(1, 'Say why.').max(300, 'At most 300 characters.');

/** A field of a form that may stay empty, or a whole number from `min`. */
const optionalWhole = (min: number, sentence: string) =>
  z
    .union([
      z.literal('').transform(() => undefined),
      z.coerce.number({ message: sentence }).int(sentence).min(min, sentence).max(1_000_000_000, sentence),
    ])
    .optional();

const minutes = optionalWhole(0, 'Minutes are a whole number.');

/** What a build step asks to be written down, as the build sheet keeps it. */
export const stepEntry = z.object({
  label: z.string(),
  unit: z.string().nullable().default(null),
  lower: z.number().nullable().default(null),
  upper: z.number().nullable().default(null),
});

export const pick = z.object({
  lot: z.string().trim().min(1, 'Scan or type a lot number.').max(40, 'A lot number is shorter.'),
  quantity: optionalWhole(1, 'A pick is a whole number, at least 1.'),
  /** Where the part stands on several lines, the one that is meant. */
  lineId: optionalWhole(1, 'There is no such line.'),
  alternateReason: optional(300),
});

export type Pick = z.infer<typeof pick>;

export const undoing = z.object({ reason: optional(300) });

export const batchIssue = z.object({
  /** Take what there is, although it is too little. */
  evenIfShort: z.union([z.boolean(), z.literal('yes').transform(() => true)]).default(false),
});

export const kitFinish = z.object({ minutes });

export const tick = z.object({
  stepId: z.coerce.number().int().positive(),
  entry: optional(200),
  minutes,
});

export type Tick = z.infer<typeof tick>;

export const newHold = z.object({ reason });
export const holdEnd = z.object({ reason });

export const newRework = z.object({
  cause: z.string().trim().min(1, 'Say what was wrong.').max(300, 'At most 300 characters.'),
});

/** One of the likely causes, or another that was typed; what was typed counts. */
const foundCause = { foundCause: optional(120), otherCause: optional(120) };

export const reworkFinding = z.object(foundCause).transform(({ foundCause: chosen, otherCause }, issue) => {
  const found = otherCause ?? chosen;
  if (found !== undefined) return { foundCause: found };
  issue.addIssue({ code: 'custom', path: ['otherCause'], message: 'Choose a cause, or type one.' });
  return z.NEVER;
});

export const reworkEnd = z
  .object({
    remedy: z.string().trim().min(1, 'Say what was done.').max(300, 'At most 300 characters.'),
    minutes,
    ...foundCause,
  })
  .transform(({ foundCause: chosen, otherCause, ...rest }) => ({
    ...rest,
    foundCause: otherCause ?? chosen,
  }));
