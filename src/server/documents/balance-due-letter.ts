import { z } from 'zod';
import { formatMoney } from '~/domain/money/format-money';
import { paths } from '~/lib/paths';
import { linkToken } from '~/server/auth/tokens';
import { env } from '~/server/env';
import { balanceDueLetter } from '~/server/mail/balance-due';
import { readBalance } from '~/server/queries/counter/read-balance';
import { fullUrl, readSender } from './letter';
import type { LetterWriter } from './letter';

const payloadSchema = z.object({ orderId: z.number().int() });

/** The letter that asks for the rest of an order; none where it has been paid meanwhile. */
export const writeBalanceDue: LetterWriter = async (reader, payload) => {
  const order = await readBalance(reader, { id: payloadSchema.parse(payload).orderId });
  if (order === null || order.isErased || order.balanceMinor === 0) return null;
  const letter = balanceDueLetter({
    sender: await readSender(reader),
    orderNumber: String(order.number),
    balance: formatMoney({ minor: order.balanceMinor, currency: order.currency }),
    // A page of the provider lives half an hour; the order's own page opens one when the buyer is there.
    payUrl: fullUrl(paths.orderByLink(linkToken(env().secret, 'order', order.id))),
  });
  return { ...letter, to: order.email };
};
