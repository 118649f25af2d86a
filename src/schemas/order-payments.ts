import { z } from 'zod';

/** Money that came by hand, written down by the owner. */
export const handPayment = z.object({
  kind: z.enum(['transfer', 'cash'], { message: 'Say how it was paid: by transfer or in cash.' }),
  amountMinor: z.coerce
    .number({ message: 'Enter the amount in whole minor units.' })
    .int('Enter the amount in whole minor units.')
    .positive('An amount is above zero.')
    .max(100_000_000_000, 'That is more than an order can cost.'),
});

export const handPaymentRecorded = z.object({
  paymentId: z.number().int(),
  balanceMinor: z.number().int(),
});

export const orderNumberParam = z.object({ number: z.coerce.number().int().positive() });
export const orderTokenParam = z.object({ token: z.string().min(20).max(100) });

export const checkoutWanted = z.object({
  number: z.number().int(),
  providerUrl: z.string().nullable(),
  payUrl: z.string(),
});
