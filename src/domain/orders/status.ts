/** Where an order stands. A deposit that is paid makes it `paid`; whether a balance is due is asked of its payments. */
export const orderStates = ['awaiting_payment', 'paid', 'cancelled', 'fulfilled'] as const;
export type OrderState = (typeof orderStates)[number];

const NEXT: Record<OrderState, readonly OrderState[]> = {
  awaiting_payment: ['paid', 'cancelled'],
  paid: ['cancelled', 'fulfilled'],
  cancelled: [],
  fulfilled: [],
};

const WORDS: Record<OrderState, string> = {
  awaiting_payment: 'waits for payment',
  paid: 'paid',
  cancelled: 'cancelled',
  fulfilled: 'shipped',
};

/** An order's state in words. */
export function orderStateWords(state: OrderState): string {
  return WORDS[state];
}

type Answer = { ok: true } | { ok: false; reason: string };

function may(state: OrderState, next: OrderState, deed: string): Answer {
  return NEXT[state].includes(next)
    ? { ok: true }
    : { ok: false, reason: `The order ${verb(state)} and cannot be ${deed}.` };
}

/** What may be done with an order in a state. Asked by buttons and services alike. */
export const orderCan = {
  /** Take the first payment, which spawns its units. */
  pay: (state: OrderState): Answer => may(state, 'paid', 'paid for again'),
  /** A payment that arrives for what is still due. */
  payBalance: (state: OrderState): Answer =>
    state === 'paid'
      ? { ok: true }
      : { ok: false, reason: `The order ${verb(state)}; there is no balance to pay.` },
  cancel: (state: OrderState): Answer => may(state, 'cancelled', 'cancelled'),
  /** Mark that every unit and spare has left. */
  fulfil: (state: OrderState): Answer => may(state, 'fulfilled', 'closed as shipped'),
  /** Whether units may be built and sent for it. */
  ship: (state: OrderState): Answer =>
    state === 'paid'
      ? { ok: true }
      : { ok: false, reason: `The order ${verb(state)}; nothing is sent for it.` },
};

function verb(state: OrderState): string {
  return state === 'awaiting_payment' ? 'waits for payment' : `is ${WORDS[state]}`;
}

/** What is still to be paid, in minor units: never below zero. */
export function balanceDueMinor(order: {
  totalMinor: number;
  paidMinor: number;
  refundedMinor: number;
}): number {
  return Math.max(0, order.totalMinor - (order.paidMinor - order.refundedMinor));
}

/** Whether an order of this state still has to be paid for, as far as it is not. */
export function orderOwes(state: OrderState): boolean {
  return orderCan.pay(state).ok || orderCan.payBalance(state).ok;
}
