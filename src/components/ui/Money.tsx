import { formatMoney, formatMoneyInFull } from '~/domain/money/format-money';

interface Props {
  /** Whole minor units of an ISO 4217 currency. */
  minor: number;
  currency: string;
  /** With all its digits, for a column of figures. */
  inFull?: boolean | undefined;
}

/** An amount with its currency, in the monospaced face. */
export function Money({ minor, currency, inFull = false }: Props) {
  const amount = { minor, currency };
  return (
    <span className="font-mono whitespace-nowrap">
      {inFull ? formatMoneyInFull(amount) : formatMoney(amount)}
    </span>
  );
}
