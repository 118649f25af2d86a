import type { ResolvedLine } from '~/domain/planning/resolve-bom';

/** What is picked for a BOM line of one unit and still in it. */
export interface LinePick {
  lineId: number | null;
  quantity: number;
  designators: readonly string[];
}

/** How a line of a unit stands. */
export interface LineProgress {
  /** From lots that were named for this unit. */
  picked: number;
  /** From what was issued to the whole batch, as far as it reaches. */
  fromBatch: number;
  missing: number;
  /** Places of the line that no pick has filled yet. */
  openPlaces: string[];
}

/**
 * How far one line of a unit's kit has come.
 *
 * @param line as the unit's options resolve it
 * @param picks of this unit that remain in it, of any line
 * @param batch for parts traced by batch: what was issued of the line, and what finished kits have of it
 */
export function progressOf(
  line: Pick<ResolvedLine, 'lineId' | 'quantity' | 'designators'>,
  picks: readonly LinePick[],
  batch: { issued: number; taken: number } | null,
): LineProgress {
  const own = picks.filter((pick) => pick.lineId === line.lineId);
  const picked = own.reduce((sum, pick) => sum + pick.quantity, 0);
  const lacking = Math.max(0, line.quantity - picked);
  const fromBatch = batch === null ? 0 : Math.min(lacking, Math.max(0, batch.issued - batch.taken));
  const filled = new Set(own.flatMap((pick) => pick.designators));
  return {
    picked,
    fromBatch,
    missing: lacking - fromBatch,
    openPlaces: line.designators.filter((place) => !filled.has(place)),
  };
}

/** The places that a pick of so many fills: one each where a line has a place for every piece, else none is named. */
export function placesFor(
  line: Pick<ResolvedLine, 'quantity' | 'designators'>,
  openPlaces: readonly string[],
  quantity: number,
): string[] {
  return line.designators.length === line.quantity ? openPlaces.slice(0, quantity) : [...line.designators];
}

/**
 * What the units of a batch need of each line, with the scrap allowance, rounded up to whole pieces.
 *
 * @param units their lines, each as its own options resolve it
 * @param scrapPercentOf by line
 */
export function needOfBatch(
  units: readonly (readonly Pick<ResolvedLine, 'lineId' | 'quantity'>[])[],
  scrapPercentOf: (lineId: number) => number,
): Map<number, number> {
  const bare = new Map<number, number>();
  for (const { lineId, quantity } of units.flat()) bare.set(lineId, (bare.get(lineId) ?? 0) + quantity);
  return new Map(
    [...bare].map(([lineId, quantity]) => {
      // Hundredths of a per cent are whole numbers: 20 × 102.5 % must not become 20.500000000000004.
      const share = 10_000 + Math.round(scrapPercentOf(lineId) * 100);
      return [lineId, Math.ceil((quantity * share) / 10_000)];
    }),
  );
}
