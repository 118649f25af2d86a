/** How long a place is held while its buyer pays. */
export const CHECKOUT_HOLD_MINUTES = 30;

export interface BatchPlaces {
  places: number;
  taken: number;
  held: number;
}

/** Places that nobody has taken or holds. */
export function freePlaces({ places, taken, held }: BatchPlaces): number {
  return Math.max(0, places - taken - held);
}

/**
 * Whether a number of places can be held for a checkout, and why not. A place that is only held may come free
 * again, which the reason says.
 */
export function checkPlaces(
  batch: BatchPlaces,
  quantity: number,
): { ok: true; free: number } | { ok: false; reason: string } {
  if (!Number.isSafeInteger(quantity) || quantity < 1)
    return { ok: false, reason: 'Choose how many rigs: one or more.' };
  const free = freePlaces(batch);
  if (quantity <= free) return { ok: true, free: free - quantity };
  const perhaps =
    batch.held > 0 && quantity <= batch.places - batch.taken
      ? ` ${batch.held === 1 ? 'One place is' : `${batch.held} places are`} held by somebody who is paying now and may come free within ${CHECKOUT_HOLD_MINUTES} minutes.`
      : '';
  const left =
    free === 0
      ? 'No place is left in this batch.'
      : `Only ${free} ${free === 1 ? 'place is' : 'places are'} left in this batch.`;
  return { ok: false, reason: left + perhaps };
}

/** The instant at which a hold that begins now ends. */
export function holdEnd(now: Date): Date {
  return new Date(now.getTime() + CHECKOUT_HOLD_MINUTES * 60_000);
}

/**
 * Whether a text has the shape of an amateur call sign: letters, a digit and letters, perhaps with a prefix or a suffix
 * after a stroke. Loose on purpose: countries give out odd ones, and nobody has to have one.
 */
export function isCallSignShape(text: string): boolean {
  const parts = text.trim().toUpperCase().split('/');
  return (
    parts.length <= 3 &&
    parts.every((part) => /^[A-Z0-9]{1,10}$/.test(part)) &&
    parts.some((part) => /^[A-Z0-9]{1,3}\d[A-Z0-9]{0,5}[A-Z]$/.test(part) && /[A-Z]/.test(part.slice(0, 3)))
  );
}
