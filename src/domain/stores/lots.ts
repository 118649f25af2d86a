export const lotStates = ['waiting', 'usable', 'barred'] as const;
export type LotState = (typeof lotStates)[number];

export interface Lot {
  id: number;
  number: string;
  state: LotState;
  onHand: number;
  receivedAt: Date;
}

type Answer = { ok: true } | { ok: false; reason: string };

/** Whether a quantity (whole smallest units of the part) can be picked from a lot. */
export function canPick(lot: Lot, quantity: number): Answer {
  if (!Number.isSafeInteger(quantity) || quantity < 1) return no('A pick is of one or more.');
  switch (lot.state) {
    case 'waiting':
      return no(`Lot ${lot.number} waits to be looked at and is not usable yet.`);
    case 'barred':
      return no(`Lot ${lot.number} is barred.`);
    case 'usable':
      return quantity <= lot.onHand
        ? { ok: true }
        : no(`Lot ${lot.number} has ${lot.onHand}, and ${quantity} are wanted.`);
  }
}

/**
 * Takes a quantity from usable lots, oldest first, from several where one is not enough. Refused where all of them
 * together have too little; `short` is how many are missing.
 */
export function chooseLots(
  lots: readonly Lot[],
  quantity: number,
): { ok: true; picks: { lotId: number; quantity: number }[] } | { ok: false; reason: string; short: number } {
  if (!Number.isSafeInteger(quantity) || quantity < 1)
    return { ok: false, reason: 'A pick is of one or more.', short: 0 };
  const picks: { lotId: number; quantity: number }[] = [];
  let open = quantity;
  const oldestFirst = lots
    .filter((lot) => lot.state === 'usable' && lot.onHand > 0)
    .sort((a, b) => a.receivedAt.getTime() - b.receivedAt.getTime() || a.id - b.id);
  for (const lot of oldestFirst) {
    if (open === 0) break;
    const taken = Math.min(open, lot.onHand);
    picks.push({ lotId: lot.id, quantity: taken });
    open -= taken;
  }
  if (open === 0) return { ok: true, picks };
  const found = quantity - open;
  return {
    ok: false,
    reason: `${quantity} are wanted, and usable lots have ${found === 0 ? 'none' : found}.`,
    short: open,
  };
}

function no(reason: string): { ok: false; reason: string } {
  return { ok: false, reason };
}
