import { z } from 'zod';
import { partNumber } from './stores-parts';

const optional = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `At most ${max} characters.`)
    .transform((text) => (text === '' ? undefined : text))
    .optional();

const reason = z.string().trim().min(1, 'Say why.').max(300, 'At most 300 characters.');

const wholeNumber = z.coerce
  .number({ message: 'Enter a whole number.' })
  .int('Enter a whole number.')
  .max(1_000_000_000, 'That is more than a lot can hold.');

/** The lot's total in whole minor units; left empty where nobody wants to know. */
const costMinor = z
  .union([z.literal('').transform(() => undefined), wholeNumber.min(0, 'A cost is not below zero.')])
  .optional();

export const receipt = z.object({
  part: partNumber,
  quantity: wholeNumber.min(1, 'Enter how many came, at least 1.'),
  supplier: optional(120),
  bin: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^([A-Z0-9][A-Z0-9._/-]{0,19})?$/, 'A bin has up to 20 letters, digits and . _ / -.')
    .transform((text) => (text === '' ? undefined : text))
    .optional(),
  dateCode: optional(30),
  costMinor,
  /** The same as people type it, `437.50`. */
  cost: optional(20),
  currency: z
    .string()
    .regex(/^[A-Z]{3}$/, 'A currency has three capital letters.')
    .optional(),
  state: z.enum(['waiting', 'usable'], { message: 'Choose whether it may be used.' }).default('usable'),
});

export type Receipt = z.infer<typeof receipt>;

export const lotStateChange = z
  .object({
    state: z.enum(['waiting', 'usable', 'barred'], { message: 'Choose a state.' }),
    reason: optional(300),
  })
  .refine(({ state, reason: why }) => state !== 'barred' || why !== undefined, {
    path: ['reason'],
    message: 'Say why the lot is barred.',
  });

export type LotStateChange = z.infer<typeof lotStateChange>;

export const lotCount = z.object({
  counted: wholeNumber.min(0, 'A count is not below zero.'),
  reason,
});

export type LotCount = z.infer<typeof lotCount>;

export const entryReversal = z.object({ entryId: z.coerce.number().int().positive(), reason });
