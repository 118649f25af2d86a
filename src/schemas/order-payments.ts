import { z } from 'zod';
import { parseMoney } from '~/domain/money/parse-money';

/** A form sends the amount as people type it, with its currency. */
const typedAmount = z.object({ amount: z.string().max(20), currency: z.string() }).passthrough();

function inMinorUnits(value: unknown): unknown {
  const typed = typedAmount.safeParse(value);
  if (!typed.success) return value;
  const { amount, currency, ...rest } = typed.data;
  const read = parseMoney(amount, currency);
  return { ...rest, amountMinor: read.ok ? read.money.minor : Number.NaN };
}

/** Money that came by hand, written down by the owner: `amountMinor`, or `amount` with `currency`. */
export const handPayment = z.preprocess(
  inMinorUnits,
  z.object({
    kind: z.enum(['transfer', 'cash'], { message: 'Say how it was paid: by transfer or in cash.' }),
    amountMinor: z.coerce
      .number({ message: 'Enter an amount in the currency of the order, such as 437 or 437.50.' })
      .int('Enter the amount in whole minor units.')
      .positive('An amount is above zero.')
      .max(100_000_000_000, 'That is more than an order can cost.'),
  }),
);

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
