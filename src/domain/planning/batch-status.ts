export const batchStates = ['planned', 'open', 'building', 'closed'] as const;
export type BatchState = (typeof batchStates)[number];

const NEXT: Record<BatchState, readonly BatchState[]> = {
  planned: ['open', 'closed'],
  open: ['building', 'closed'],
  building: ['open', 'closed'],
  closed: ['open', 'building'],
};

const WORDS: Record<BatchState, string> = {
  planned: 'planned',
  open: 'open for orders',
  building: 'being built, open for orders',
  closed: 'closed to orders',
};

/** A batch's state in words. */
export function batchStateWords(state: BatchState): string {
  return WORDS[state];
}

/** Whether places of a batch of this state can be ordered: also while it is being built. */
export function batchTakesOrders(state: BatchState): boolean {
  return state === 'open' || state === 'building';
}

/** The states that a batch may be put into from one, that one first. */
export function nextBatchStates(state: BatchState): BatchState[] {
  return [state, ...NEXT[state]];
}

/** Whether a batch is closed to orders, so that the day of its closing is kept. */
export function batchIsClosed(state: BatchState): boolean {
  return state === 'closed';
}
