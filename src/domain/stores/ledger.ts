/** A line of the store's ledger: into the lot positive, out of it negative. Never changed, only reversed by another. */
export interface StoreEntry {
  id: number;
  lotId: number;
  quantity: number;
  /** The entry that this one takes back. */
  reversesId: number | null;
}

/** What a lot has: the sum of its entries. */
export function onHand(entries: readonly Pick<StoreEntry, 'quantity'>[]): number {
  return entries.reduce((sum, entry) => sum + entry.quantity, 0);
}

/** Whether a movement can be entered for a lot that has `have`: it is whole, not nothing, and leaves no less than none. */
export function checkEntry(
  have: number,
  quantity: number,
): { ok: true; onHand: number } | { ok: false; reason: string } {
  if (!Number.isSafeInteger(quantity) || quantity === 0) {
    return { ok: false, reason: 'A movement is a whole number other than none.' };
  }
  const after = have + quantity;
  return after >= 0
    ? { ok: true, onHand: after }
    : { ok: false, reason: `The lot has ${have}; ${-quantity} cannot be taken from it.` };
}

/**
 * The movement that takes an entry back. Each entry is reversed once, a reversal is not reversed (enter the movement
 * anew instead), and what was used since cannot be taken back.
 */
export function reversalOf(
  entry: StoreEntry,
  lotEntries: readonly StoreEntry[],
): { ok: true; quantity: number } | { ok: false; reason: string } {
  if (entry.reversesId !== null)
    return { ok: false, reason: 'This entry is itself a reversal; enter the movement anew.' };
  if (lotEntries.some((other) => other.reversesId === entry.id)) {
    return { ok: false, reason: 'This entry is reversed already.' };
  }
  const checked = checkEntry(onHand(lotEntries), -entry.quantity);
  return checked.ok ? { ok: true, quantity: -entry.quantity } : checked;
}
