import type { StaffRole } from '~/domain/people/roles';

export type ShipmentState = 'packed' | 'shipped';

type Answer = { ok: true } | { ok: false; reason: string };

/** What may be done with a parcel. Asked by buttons and services alike. */
export const parcelCan = {
  ship: (state: ShipmentState): Answer => notGone(state),
  unpack: (state: ShipmentState): Answer => notGone(state),
};

function notGone(state: ShipmentState): Answer {
  return state === 'packed' ? { ok: true } : { ok: false, reason: 'The parcel has left the works.' };
}

/** A parcel's state in words. */
export function parcelStateWords(state: ShipmentState): string {
  return state === 'packed' ? 'packed, waits for its carrier' : 'shipped';
}

/** Whether people of these roles see to whom a parcel goes: a shipper only while it is here. */
export function seesAddressee(roles: readonly StaffRole[], state: ShipmentState): boolean {
  if (roles.includes('owner') || roles.includes('bookkeeper')) return true;
  return roles.includes('shipper') && state === 'packed';
}

/** An order is closed when as many units as were ordered have left. */
export function allHasLeft(order: { rigsOrdered: number; unitsGone: number }): boolean {
  return order.rigsOrdered > 0 && order.unitsGone >= order.rigsOrdered;
}

export interface AskFacts {
  balanceMinor: number;
  paidMinor: number;
  /** Units whose final test is passed and closed. */
  unitsPassed: number;
}

/** Whether the buyer may be asked for the balance now. */
export function canAskForBalance({ balanceMinor, paidMinor, unitsPassed }: AskFacts): Answer {
  if (balanceMinor === 0) return { ok: false, reason: 'The order is paid in full.' };
  if (paidMinor === 0) return { ok: false, reason: 'No deposit was paid.' };
  if (unitsPassed === 0) return { ok: false, reason: 'No unit of the order has passed its final test yet.' };
  return { ok: true };
}
