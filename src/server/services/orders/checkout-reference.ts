interface Checkout {
  id: number;
  createdAt: Date;
}

/**
 * What the payment provider knows a checkout by. With the moment in it, a database that was begun anew, or
 * another works on the same account, never meets the idempotency key or the events of this one.
 */
export function checkoutReference({ id, createdAt }: Checkout): string {
  return `${id}-${createdAt.getTime()}`;
}

/** Which checkout a reference may be of; compare {@link checkoutReference} of what is found. */
export function checkoutIdOf(reference: string): number | null {
  const match = /^(\d{1,15})-\d{1,15}$/.exec(reference);
  return match?.[1] === undefined ? null : Number(match[1]);
}
