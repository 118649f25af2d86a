import { z } from 'zod';
import { minorDigitsOf } from '~/domain/money/currencies';
import { parseMoney } from '~/domain/money/parse-money';
import { batchStates } from '~/domain/planning/batch-status';

const places = z.coerce
  .number({ message: 'Say how many places, as a whole number.' })
  .int('Say how many places, as a whole number.')
  .min(1, 'A batch has at least one place.')
  .max(10_000, 'A batch has at most 10,000 places.');

/** An amount as typed, in the currency that is sent with it. */
const amount = z.string({ message: 'Enter an amount.' }).trim().max(20, 'Enter an amount.');
const orEmpty = (value: unknown) => (value === '' || value === undefined ? null : value);

const currency = z
  .string({ message: 'Name the currency.' })
  .trim()
  .toUpperCase()
  .refine((code) => minorDigitsOf(code) !== null, 'Three letters, as in ISO 4217: EUR, GBP, USD.');

const day = z
  .string()
  .trim()
  .regex(/^\d{4}-\d{2}-\d{2}$/, 'Enter the day as 2027-03-09.')
  .refine((text) => {
    const date = new Date(`${text}T00:00:00Z`);
    return !Number.isNaN(date.getTime()) && date.toISOString().startsWith(text);
  }, 'There is no such day.');

const priced = {
  places,
  price: amount,
  /** Empty where the whole price is due at once. */
  deposit: z.preprocess(orEmpty, amount.nullable()),
  currency,
  estimatedOn: z.preprocess(orEmpty, day.nullable()),
};

interface Typed {
  price: string;
  deposit: string | null;
  currency: string;
}

/** The typed amounts in minor units; what cannot be read is said beside its field. */
function inMinor<T extends Typed>({ price, deposit, ...rest }: T, issues: z.RefinementCtx) {
  const priceMinor = minorOf(price, rest.currency, 'price', issues);
  const depositMinor = deposit === null ? null : minorOf(deposit, rest.currency, 'deposit', issues);
  if (priceMinor === 0) {
    issues.addIssue({ code: 'custom', path: ['price'], message: 'A place costs more than nothing.' });
  }
  if (depositMinor !== null && (depositMinor === 0 || depositMinor >= priceMinor)) {
    const message = 'A deposit is less than the price, and more than nothing. Leave it empty for none.';
    issues.addIssue({ code: 'custom', path: ['deposit'], message });
  }
  return { ...rest, priceMinor, depositMinor };
}

function minorOf(text: string, currencyCode: string, field: string, issues: z.RefinementCtx): number {
  const read = parseMoney(text, currencyCode);
  if (read.ok) return read.money.minor;
  issues.addIssue({ code: 'custom', path: [field], message: read.reason });
  return -1;
}

export const batchOpening = z
  .object({
    modelSlug: z.string({ message: 'Choose a model.' }).trim().min(1, 'Choose a model.').max(60),
    ...priced,
  })
  .transform(inMinor);

export const batchOpened = z.object({ batchId: z.number().int(), number: z.number().int() });

export const batchChange = z
  .object({
    version: z.coerce.number().int(),
    state: z.enum(batchStates, { message: 'Choose a state.' }),
    ...priced,
  })
  .transform(inMinor);

export const batchNumberParam = z.object({ number: z.coerce.number().int().positive() });

export const batchListing = z.array(
  z.object({
    number: z.number().int(),
    modelName: z.string(),
    modelSlug: z.string(),
    state: z.enum(batchStates),
    places: z.number().int(),
    taken: z.number().int(),
    held: z.number().int(),
    free: z.number().int(),
    estimatedOn: z.string().nullable(),
    /** Null for people who do not see prices. */
    price: z.object({ minor: z.number().int(), currency: z.string() }).nullable(),
    stages: z.array(z.object({ stage: z.string(), count: z.number().int() })),
    holds: z.number().int(),
  }),
);
