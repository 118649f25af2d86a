import { invariant } from '~/lib/invariant';
import type { Money } from './money';
import { addMoney, money, multiplyMoney } from './money';

export interface PricedLine {
  unitPrice: Money;
  quantity: number;
  /** Tax in millionths of the net price: 19 % is 190,000; 8.875 % is 88,750. */
  taxPpm: number;
}

export interface OrderTotal {
  net: Money;
  tax: Money;
  total: Money;
}

/** The net price of a line. */
export function lineTotal(line: PricedLine): Money {
  invariant(Number.isSafeInteger(line.quantity) && line.quantity > 0, 'a line has a quantity above zero');
  return multiplyMoney(line.unitPrice, line.quantity);
}

/** The tax of a line, rounded on the line, half to even. */
export function taxOf(line: PricedLine): Money {
  invariant(line.taxPpm >= 0, 'a tax is not negative');
  return multiplyMoney(lineTotal(line), line.taxPpm, 1_000_000);
}

/** The total of an order: the sum of its lines as they were rounded, never rounded again. */
export function orderTotal(lines: readonly PricedLine[], currency: string): OrderTotal {
  const nothing = money(0, currency);
  const net = lines.map(lineTotal).reduce(addMoney, nothing);
  const tax = lines.map(taxOf).reduce(addMoney, nothing);
  return { net, tax, total: addMoney(net, tax) };
}
