import { setLetter, type Letter, type LetterSender } from './layout';

interface OrderReceived {
  sender: LetterSender;
  orderNumber: string;
  buyerName: string;
  /** Amounts as people read them, with currency. */
  lines: readonly { name: string; amount: string }[];
  total: string;
  paid: string;
  /** What is still to pay before it ships, or null when all is paid. */
  balance: string | null;
  /** One for each rig, in order of serial number. */
  units: readonly { serial: string; modelName: string }[];
  /** As people read it, for example `by 23 March 2027`; null where nothing is promised. */
  shipWindow: string | null;
  orderUrl: string;
}

/** Tells a buyer that the payment is here and the place is theirs. */
export function orderReceivedLetter(order: OrderReceived): Letter {
  const { units, balance, shipWindow } = order;
  const place =
    units.length === 0
      ? 'We begin to pack it.'
      : units.length === 1
        ? 'The place in the batch is yours, and your rig has its serial number:'
        : 'The places in the batch are yours, and your rigs have their serial numbers:';
  return setLetter({
    sender: order.sender,
    subject: `Order ${order.orderNumber} is paid`,
    heading: `Order ${order.orderNumber} is paid`,
    blocks: [
      { kind: 'paragraph', text: `${order.buyerName}, we have your payment. ${place}` },
      ...units.map((unit) => ({ kind: 'tag', ...unit }) as const),
      ...(shipWindow === null
        ? []
        : [
            {
              kind: 'paragraph',
              text: `We expect to ship ${shipWindow}. If that changes we write.`,
            } as const,
          ]),
      {
        kind: 'facts',
        rows: [
          ...order.lines.map(({ name, amount }) => [name, amount] as const),
          ['Total', order.total],
          ['Paid', order.paid],
          ...(balance === null ? [] : [['To pay before it ships', balance] as const]),
        ],
      },
      { kind: 'button', words: 'See how it is coming along', url: order.orderUrl },
      {
        kind: 'paragraph',
        text: 'This page is for you. Whoever has the link sees the order, so do not pass it on.',
      },
    ],
  });
}
