import { z } from 'zod';
import { formList } from './form-list';
import { isCallSignShape } from '~/domain/orders/checkout';
import { isCountryCode } from '~/lib/countries';

/** Control characters, and the marks that turn the direction of what stands around them. */
// eslint-disable-next-line no-control-regex -- control characters are what is looked for
const UNPRINTABLE = /[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u200e\u200f\u202a-\u202e\u2066-\u2069\ufeff]/gu;

function line(max: number) {
  return z
    .string()
    .transform((text) => text.replaceAll(UNPRINTABLE, '').replaceAll('\n', ' ').trim())
    .pipe(z.string().max(max, `At most ${max} characters.`));
}

const required = (max: number, sentence: string) =>
  z
    .string({ required_error: sentence, invalid_type_error: sentence })
    .pipe(line(max))
    .pipe(z.string().min(1, sentence));

const orNone = <T extends z.ZodTypeAny>(schema: T) =>
  z
    .string()
    .nullish()
    .transform((text) => (text === undefined || text === null || text.trim() === '' ? null : text))
    .pipe(schema.nullable());

/** What a mail server takes without quoting; the same shape that the mail sender asks for. */
const email = z
  .string({ required_error: 'Give the e-mail address at which we can reach you.' })
  .trim()
  .toLowerCase()
  .min(1, 'Give the e-mail address at which we can reach you.')
  .max(254, 'An e-mail address has at most 254 characters.')
  .email('This is not an e-mail address. It looks like name@example.test.');

const addressLines = z
  .preprocess(
    (value) => (typeof value === 'string' ? value.split(/\r?\n/) : value),
    z.array(line(120), { required_error: 'Give the street, as it is written where you live.' }),
  )
  .transform((lines) => lines.filter((text) => text !== ''))
  .pipe(
    z
      .array(z.string())
      .min(1, 'Give the street, as it is written where you live.')
      .max(6, 'An address has at most six lines.'),
  );

/** What a buyer sends to take a place in a batch. A form sends `option` once for each option chosen. */
export const orderPlacing = z.object({
  batch: z.coerce.number({ message: 'Choose a batch.' }).int('Choose a batch.').positive('Choose a batch.'),
  option: z.preprocess(
    formList,
    z.array(z.string().max(60)).max(100, 'Those are more options than a model has.'),
  ),
  quantity: z.coerce
    .number({ message: 'Say how many, as a whole number.' })
    .int('Say how many, as a whole number.')
    .min(1, 'Order at least one.')
    .max(50, 'For more than 50 rigs, write to us.')
    .default(1),
  pay: z.enum(['deposit', 'full'], { message: 'Choose what to pay now.' }).default('full'),
  email,
  name: required(300, 'Give the name of whoever receives the parcel.'),
  callSign: orNone(
    z
      .string()
      .transform((text) => text.trim().toUpperCase())
      .pipe(
        z
          .string()
          .max(20, 'A call sign has at most 20 characters.')
          .refine(isCallSignShape, 'This does not look like a call sign. Leave it empty if you have none.'),
      ),
  ),
  phone: orNone(line(40)),
  addressLines,
  city: required(120, 'Give the town.'),
  region: line(120).default(''),
  postcode: line(20).default(''),
  country: z
    .string({ required_error: 'Choose the country.' })
    .trim()
    .toUpperCase()
    .refine(isCountryCode, 'Choose the country.'),
});

export type OrderPlacing = z.output<typeof orderPlacing>;

export const orderPlaced = z.object({
  number: z.number().int(),
  /** The buyer's own page, with its secret link. */
  orderUrl: z.string(),
  /** Leads to the payment page. */
  payUrl: z.string(),
  /** The provider's own page; null where it did not answer yet. */
  providerUrl: z.string().nullable(),
});
