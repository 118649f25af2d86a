import { setLetter, type Letter, type LetterSender } from './layout';

interface OrderWithoutPlace {
  sender: LetterSender;
  orderNumber: string;
  buyerName: string;
  /** As people read it, with currency. */
  refund: string;
  shopUrl: string;
}

/** Tells a buyer that the payment came too late for the place, and that the money goes back. */
export function orderWithoutPlaceLetter(order: OrderWithoutPlace): Letter {
  return setLetter({
    sender: order.sender,
    subject: `Order ${order.orderNumber} is cancelled and your money goes back`,
    heading: `Order ${order.orderNumber} is cancelled`,
    blocks: [
      {
        kind: 'paragraph',
        text: `${order.buyerName}, your payment came after the place had been given back, and the last one in the batch has gone to somebody else. The order is cancelled.`,
      },
      { kind: 'facts', rows: [['Goes back to you', order.refund]] },
      {
        kind: 'paragraph',
        text: 'You need not do anything. The refund goes the way that you paid; how soon it shows depends on your bank.',
      },
      { kind: 'link', words: 'See which batches have places', url: order.shopUrl },
    ],
  });
}
