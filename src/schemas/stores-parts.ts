import { z } from 'zod';

/** An optional text of a form: left empty means not given. */
const optional = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `At most ${max} characters.`)
    .transform((text) => (text === '' ? undefined : text))
    .optional();

/** A part's own number: printed on labels and read by scanners. */
export const partNumber = z
  .string()
  .trim()
  .toUpperCase()
  .regex(
    /^[A-Z0-9][A-Z0-9._/+-]{0,39}$/,
    'A part number has up to 40 letters, digits and . _ / + - and begins with a letter or digit.',
  );

export const newPart = z.object({
  number: partNumber,
  description: z.string().trim().min(1, 'Say what the part is.').max(200, 'At most 200 characters.'),
  value: z.string().trim().max(60, 'At most 60 characters.').default(''),
  footprint: z.string().trim().max(80, 'At most 80 characters.').default(''),
  unit: z.enum(['piece', 'mm', 'mg'], { message: 'Choose how it is counted.' }).default('piece'),
  trace: z.enum(['each', 'batch'], { message: 'Choose how it is traced.' }),
});

export type NewPart = z.infer<typeof newPart>;

export const partsSearch = z.object({
  sort: z.enum(['number', 'description', 'usable', 'onHand']).catch('number'),
  desc: z
    .literal('yes')
    .optional()
    .catch(undefined)
    .transform((value) => value !== undefined),
  q: optional(80),
  page: z.coerce.number().int().min(1).catch(1),
});
