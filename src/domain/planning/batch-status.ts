export type BatchState = 'planned' | 'open' | 'building' | 'closed';

/** Whether places of a batch of this state can be ordered: also while it is being built. */
export function batchTakesOrders(state: BatchState): boolean {
  return state === 'open' || state === 'building';
}
