const S10 = /^([A-Z]{2})(\d{8})(\d)([A-Z]{2})$/;
const WEIGHTS = [8, 6, 4, 2, 3, 5, 9, 7] as const;

export type TrackingCheck =
  | { kind: 's10'; number: string }
  | { kind: 's10_wrong'; number: string; reason: string }
  | { kind: 'other'; number: string };

/**
 * Checks a tracking number. Numbers of the post (UPU S10: two letters, eight digits, a check digit, a country) are
 * tried by their check digit; what is not of that form is a courier's own and stays as it is. `number` is the text in
 * capitals without spaces.
 */
export function checkTracking(text: string): TrackingCheck {
  const number = text.replace(/\s+/g, '').toUpperCase();
  const match = S10.exec(number);
  if (!match) return { kind: 'other', number };
  const [, , serial = '', check = ''] = match;
  return Number(check) === s10CheckDigit(serial)
    ? { kind: 's10', number }
    : {
        kind: 's10_wrong',
        number,
        reason: `${number} is mistyped: its check digit does not fit the digits before it.`,
      };
}

/** The check digit of eight digits by UPU S10. */
export function s10CheckDigit(serial: string): number {
  const sum = WEIGHTS.reduce((total, weight, index) => total + weight * Number(serial.charAt(index)), 0);
  const digit = 11 - (sum % 11);
  if (digit === 10) return 0;
  return digit === 11 ? 5 : digit;
}
