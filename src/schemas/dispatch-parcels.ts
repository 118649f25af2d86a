import { z } from 'zod';

const serials = z
  .preprocess(
    (value) => (typeof value === 'string' ? value.split(/[\s,;]+/) : value),
    z.array(z.string().trim().max(40, 'A serial number is shorter.'), {
      message: 'Scan every unit that goes into the parcel.',
    }),
  )
  .transform((list) => list.filter((text) => text !== ''))
  .pipe(
    z
      .array(z.string())
      .min(1, 'Scan every unit that goes into the parcel.')
      .max(50, 'A parcel holds at most 50 units.'),
  );

const weight = 'The weight is a whole number of grams.';

/** Packs units of an order into a parcel. */
export const parcelPacking = z.object({
  orderNumber: z.coerce.number({ message: 'Name the order.' }).int().positive(),
  serials,
  weightG: z
    .union([
      z.literal('').transform(() => null),
      z.null(),
      z.coerce.number({ message: weight }).int(weight).min(1, weight).max(500_000, 'A parcel is lighter.'),
    ])
    .default(null),
});

export const parcelPacked = z.object({ shipmentId: z.number().int(), shipmentNumber: z.number().int() });

const ticked = z.preprocess((value) => value === 'on' || value === 'yes' || value === true, z.boolean());

/** Hands a parcel to its carrier. */
export const parcelShipping = z
  .object({
    carrier: z
      .string({ message: 'Name the carrier.' })
      .trim()
      .min(1, 'Name the carrier.')
      .max(80, 'At most 80 characters.'),
    trackingNumber: z
      .string()
      .trim()
      .max(40, 'A tracking number has at most 40 characters.')
      .regex(/^[\x20-\x7e]*$/, 'A tracking number has plain letters and digits.')
      .nullish()
      .transform((text) => (text === undefined || text === null || text === '' ? null : text)),
    trackingConfirmed: ticked,
    /** It goes without a tracking number. */
    untracked: ticked,
  })
  .superRefine(({ trackingNumber, untracked }, issues) => {
    if (trackingNumber === null && !untracked) {
      const message = 'Scan the tracking number, or tick that the parcel goes without one.';
      issues.addIssue({ code: 'custom', path: ['trackingNumber'], message });
    }
  });

export const parcelShipped = z.object({
  shipmentId: z.number().int(),
  shipmentNumber: z.number().int(),
  /** All of the order has left. */
  orderFulfilled: z.boolean(),
});

export const shipmentParam = z.object({ number: z.coerce.number().int().positive() });

export const shipmentReading = z.object({
  number: z.number().int(),
  state: z.enum(['packed', 'shipped']),
  orderNumber: z.number().int(),
  carrier: z.string(),
  trackingNumber: z.string().nullable(),
  weightG: z.number().int().nullable(),
  packedAt: z.date(),
  shippedAt: z.date().nullable(),
  destination: z.string(),
  callSign: z.string().nullable(),
  /** Null where the person does not see it. */
  addressee: z.array(z.string()).nullable(),
  units: z.array(z.object({ serial: z.string(), modelName: z.string(), certificate: z.string() })),
  /** Null where the parcel stays in the works' country. */
  customs: z
    .array(
      z.object({
        description: z.string(),
        quantity: z.number().int(),
        hsCode: z.string(),
        originCountry: z.string(),
        netWeightG: z.number().int(),
        valueMinor: z.number().int(),
        currency: z.string(),
      }),
    )
    .nullable(),
});
