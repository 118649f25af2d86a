/** Whether a model of this state stands in the shop. */
export function modelIsForSale(state: 'draft' | 'for_sale' | 'withdrawn'): boolean {
  return state === 'for_sale';
}
