import { z } from 'zod';
import { orderStates } from '~/domain/orders/status';

const moment = z.date().transform((at) => at.toISOString());

/** An order as the API tells it; what the person's roles do not open is left out. */
export const orderReading = z.object({
  number: z.number().int(),
  state: z.enum(orderStates),
  placedAt: moment,
  promisedOn: z.string().nullable(),
  callSign: z.string().nullable(),
  lines: z.array(
    z.object({
      description: z.string(),
      options: z.array(z.string()),
      quantity: z.number().int(),
      batchNumber: z.number().int().nullable(),
      totalMinor: z.number().int().optional(),
    }),
  ),
  units: z.array(
    z.object({
      serial: z.string(),
      stage: z.string(),
      certificate: z.string().nullable(),
      trackingNumber: z.string().nullable(),
    }),
  ),
  money: z
    .object({
      currency: z.string(),
      totalMinor: z.number().int(),
      paidMinor: z.number().int(),
      refundedMinor: z.number().int(),
      balanceMinor: z.number().int(),
    })
    .optional(),
  waitsForBalance: z.boolean(),
  address: z
    .object({
      name: z.string(),
      addressLines: z.array(z.string()),
      city: z.string(),
      region: z.string(),
      postcode: z.string(),
      country: z.string(),
    })
    .optional(),
  email: z.string().optional(),
});

export const modelReading = z.object({
  slug: z.string(),
  name: z.string(),
  tagline: z.string(),
  ratedPowerW: z.number(),
  options: z.array(
    z.object({
      group: z.string(),
      label: z.string(),
      min: z.number().int(),
      max: z.number().int(),
      options: z.array(
        z.object({
          key: z.string(),
          label: z.string(),
          priceMinor: z.number().int(),
          needs: z.array(z.string()),
          excludes: z.array(z.string()),
        }),
      ),
    }),
  ),
  batch: z
    .object({
      number: z.number().int(),
      places: z.number().int(),
      placesLeft: z.number().int(),
      priceMinor: z.number().int(),
      depositMinor: z.number().int().nullable(),
      currency: z.string(),
      estimatedOn: z.string().nullable(),
    })
    .nullable(),
});
