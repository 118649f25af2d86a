/** What stands in a parcel for customs. */
export interface CustomsItem {
  description: string;
  hsCode: string;
  /** ISO 3166-1 alpha-2. */
  originCountry: string;
  netWeightG: number;
  valueMinor: number;
  currency: string;
}

export interface CustomsLine extends CustomsItem {
  quantity: number;
}

/**
 * The lines of a customs declaration: items that are alike make one line, with the weight and the value of
 * all of them. Null where the parcel stays in the works' country.
 */
export function customsLines(
  items: readonly CustomsItem[],
  from: string,
  destination: string,
): CustomsLine[] | null {
  if (from === destination) return null;
  const lines = new Map<string, CustomsLine>();
  for (const item of items) {
    const key = [item.description, item.hsCode, item.originCountry, item.netWeightG, item.valueMinor].join(
      '\n',
    );
    const line = lines.get(key);
    if (line === undefined) lines.set(key, { ...item, quantity: 1 });
    else line.quantity += 1;
  }
  return [...lines.values()].map((line) => ({
    ...line,
    netWeightG: line.netWeightG * line.quantity,
    valueMinor: line.valueMinor * line.quantity,
  }));
}

/** A weight for reading: `1.24 kg`, to the next 10 g. */
export function formatWeight(grams: number): string {
  return `${(Math.ceil(grams / 10) / 100).toFixed(2)}\u00a0kg`;
}

export interface CustomsTotal {
  netWeightG: number;
  valueMinor: number;
}

/** Net weight and value of a whole declaration. */
export function customsTotal(lines: readonly CustomsLine[]): CustomsTotal {
  return {
    netWeightG: lines.reduce((sum, { netWeightG }) => sum + netWeightG, 0),
    valueMinor: lines.reduce((sum, { valueMinor }) => sum + valueMinor, 0),
  };
}
