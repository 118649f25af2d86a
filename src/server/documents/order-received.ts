import { z } from 'zod';
import { formatMoney } from '~/domain/money/format-money';
import { formatDay } from '~/lib/dates';
import { paths } from '~/lib/paths';
import { linkToken } from '~/server/auth/tokens';
import { env } from '~/server/env';
import { orderReceivedLetter } from '~/server/mail/order-received';
import { orderWithoutPlaceLetter } from '~/server/mail/order-without-place';
import { readOrder } from '~/server/queries/orders/read-order';
import { fullUrl, readSender } from './letter';
import type { LetterWriter } from './letter';

const payloadSchema = z.object({ orderId: z.number().int() });
/** Letters show what stands in the books now; no payment page is offered by them. */
const noPage = new Date(0);

/** The letter that an order is paid, with the link to the buyer's own page. */
export const writeOrderReceived: LetterWriter = async (reader, payload) => {
  const order = await readOrder(reader, { id: payloadSchema.parse(payload).orderId }, noPage);
  if (order === null || order.contact.email === '') return null;
  const amount = (minor: number) => formatMoney({ minor, currency: order.currency });
  const letter = orderReceivedLetter({
    sender: await readSender(reader),
    orderNumber: String(order.number),
    buyerName: order.contact.name,
    lines: order.lines.map(({ description, options, quantity, totalMinor }) => ({
      name: [`${quantity} × ${description}`, ...options].join(', '),
      amount: amount(totalMinor),
    })),
    total: amount(order.totalMinor),
    paid: amount(order.paidMinor),
    balance: order.balanceMinor === 0 ? null : amount(order.balanceMinor),
    units: order.units.map(({ serial, modelName }) => ({ serial, modelName })),
    shipWindow: order.promisedOn === null ? null : `by ${formatDay(order.promisedOn)}`,
    orderUrl: fullUrl(paths.orderByLink(linkToken(env().secret, 'order', order.id))),
  });
  return { ...letter, to: order.contact.email };
};

/** The letter that a payment came too late for its place and goes back. */
export const writeOrderWithoutPlace: LetterWriter = async (reader, payload) => {
  const order = await readOrder(reader, { id: payloadSchema.parse(payload).orderId }, noPage);
  if (order === null || order.contact.email === '') return null;
  const letter = orderWithoutPlaceLetter({
    sender: await readSender(reader),
    orderNumber: String(order.number),
    buyerName: order.contact.name,
    refund: formatMoney({ minor: order.refundedMinor, currency: order.currency }),
    shopUrl: fullUrl(paths.shop()),
  });
  return { ...letter, to: order.contact.email };
};
