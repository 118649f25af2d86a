const words: Readonly<Record<string, string>> = {
  order_received: 'Order received',
  order_without_place: 'No place was left; the money goes back',
  balance_due: 'The balance is due',
  certificate_issued: 'Certificate',
  shipped: 'Shipped, with certificate and tracking number',
};

/** What a letter to a buyer says, in words; one that is missing here is shown by its own name. */
export function letterInWords(letter: string): string {
  return words[letter] ?? letter.replaceAll('_', ' ');
}
