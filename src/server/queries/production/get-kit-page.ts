import type { Reader } from '~/server/db/client';
import { readAlternates } from '~/server/queries/stores/read-alternates';
import { listLotsToChoose } from '~/server/queries/stores/list-lots-to-choose';
import type { LotChoice } from '~/server/queries/stores/list-lots-to-choose';
import { findUnit } from './find-unit';
import { readKit } from './read-kit';
import type { KitLine } from './read-kit';
import { readSteps } from './read-steps';

export interface KitPageLine extends KitLine {
  /** Lots of the part itself, then of its alternates by rank; oldest first. */
  lots: (LotChoice & { isAlternate: boolean })[];
  /** Where the first lot lies; what has no bin comes last. */
  bin: string | null;
}

/** A unit's kit in the order of the bins, with the lots that each line can be picked from. */
export async function getKitPage(reader: Reader, serial: string) {
  const unit = await findUnit(reader, serial);
  if (unit === null) return null;
  const kit = await readKit(reader, unit);
  const alternates = await readAlternates(reader, unit.modelId);
  const partIds = new Set([
    ...kit.map((line) => line.partId),
    ...alternates.map(({ alternatePartId }) => alternatePartId),
  ]);
  const choices = await listLotsToChoose(reader, [...partIds]);
  const lines = kit.map((line): KitPageLine => {
    const instead = alternates.filter(({ partId }) => partId === line.partId);
    const lots = [
      ...choices
        .filter(({ partId }) => partId === line.partId)
        .map((lot) => ({ ...lot, isAlternate: false })),
      ...instead.flatMap(({ alternatePartId }) =>
        choices
          .filter(({ partId }) => partId === alternatePartId)
          .map((lot) => ({ ...lot, isAlternate: true })),
      ),
    ];
    return { ...line, lots, bin: lots[0]?.bin ?? line.picks[0]?.bin ?? null };
  });
  lines.sort((a, b) => compareBins(a.bin, b.bin) || a.lineNo - b.lineNo);
  const steps = await readSteps(reader, unit);
  return { unit, lines, kitSteps: steps.filter((step) => step.stage === 'kit') };
}

function compareBins(a: string | null, b: string | null): number {
  if (a === null || b === null) return Number(a === null) - Number(b === null);
  return a.localeCompare(b, 'en', { numeric: true });
}
