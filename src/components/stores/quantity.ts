/** A quantity of a part in the unit that it is counted in: `12`, `450 mm`, `120 mg`. */
export function quantityText(quantity: number, unit: 'piece' | 'mm' | 'mg'): string {
  const digits = quantity.toLocaleString('en-GB').replaceAll(',', '\u2009').replace('-', '−');
  return unit === 'piece' ? digits : `${digits} ${unit}`;
}

/** A movement with its sign: `+12`, `−4`. */
export function movementText(quantity: number, unit: 'piece' | 'mm' | 'mg'): string {
  return quantity > 0 ? `+${quantityText(quantity, unit)}` : quantityText(quantity, unit);
}

/** Kinds of store entries in words. */
export const entryWords = {
  receipt: 'received',
  pick: 'picked',
  return: 'returned',
  count: 'counted',
  scrap: 'scrapped',
  consign: 'consigned',
  reversal: 'reversed',
} as const;

/** How a part is traced, in words. */
export const traceWords = { each: 'each, by scan', batch: 'by batch' } as const;
