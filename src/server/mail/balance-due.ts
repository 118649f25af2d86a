import { setLetter, type Letter, type LetterSender } from './layout';

interface BalanceDue {
  sender: LetterSender;
  orderNumber: string;
  /** As people read it, with currency. */
  balance: string;
  payUrl: string;
}

/** Asks for the rest of an order that was begun with a deposit. */
export function balanceDueLetter({ sender, orderNumber, balance, payUrl }: BalanceDue): Letter {
  return setLetter({
    sender,
    subject: `Order ${orderNumber}: ${balance} to pay before it ships`,
    heading: 'The balance is due',
    blocks: [
      { kind: 'paragraph', text: `Order ${orderNumber} is nearly ready. It ships when the balance is paid.` },
      { kind: 'facts', rows: [['To pay', balance]] },
      { kind: 'button', words: `Pay ${balance}`, url: payUrl },
    ],
  });
}
