import { and, eq, isNull } from 'drizzle-orm';
import { resolveBom } from '~/domain/planning/resolve-bom';
import type { ResolvedLine } from '~/domain/planning/resolve-bom';
import { progressOf } from '~/domain/production/kit';
import type { LineProgress } from '~/domain/production/kit';
import { isPast } from '~/domain/production/stages';
import type { Reader } from '~/server/db/client';
import { bins, lots, parts, picks, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readBomLines } from './read-bom';
import type { LineOfPart } from './read-bom';

/** A pick that remains in a unit. */
export interface KitPick {
  id: number;
  lineId: number | null;
  lotNumber: string;
  /** Where the lot lies. */
  bin: string | null;
  partId: number;
  partNumber: string;
  quantity: number;
  designators: string[];
  alternateReason: string | null;
}

export interface KitLine extends ResolvedLine, LineProgress {
  part: Pick<LineOfPart, 'partNumber' | 'partDescription' | 'partUnit' | 'trace'>;
  picks: KitPick[];
}

type UnitOfKit = Pick<typeof units.$inferSelect, 'id' | 'batchId' | 'bomRevisionId' | 'options'>;

/**
 * The kit of a unit: the lines of its BOM as its options resolve them, and how far each has come.
 *
 * @throws DomainError `conflict` where its BOM cannot be resolved for its options
 */
export async function readKit(reader: Reader, unit: UnitOfKit): Promise<KitLine[]> {
  if (unit.bomRevisionId === null) return [];
  const bom = await readBomLines(reader, unit.bomRevisionId);
  const resolved = resolvedOrRefused(bom, unit.options);
  const own = await readPicks(reader, unit.id);
  const batch = unit.batchId === null ? null : await readBatchCover(reader, unit, unit.batchId, bom);
  const byId = new Map(bom.map((line) => [line.id, line]));
  return resolved.flatMap((line) => {
    const found = byId.get(line.lineId);
    if (found === undefined) return [];
    const { partNumber, partDescription, partUnit, trace } = found;
    const cover = trace === 'each' ? null : (batch?.get(line.lineId) ?? null);
    return [
      {
        ...line,
        ...progressOf(line, own, cover),
        part: { partNumber, partDescription, partUnit, trace },
        picks: own.filter((pick) => pick.lineId === line.lineId),
      },
    ];
  });
}

/** The lines of a BOM for one choice of options. */
export function resolvedOrRefused(bom: readonly LineOfPart[], options: readonly string[]): ResolvedLine[] {
  const resolved = resolveBom(bom, new Set(options));
  if (resolved.ok) return resolved.lines;
  throw new DomainError(
    'conflict',
    `The BOM does not resolve for this unit's options. ${resolved.reasons.join(' ')}`,
  );
}

async function readPicks(reader: Reader, unitId: number): Promise<KitPick[]> {
  return reader
    .select({
      id: picks.id,
      lineId: picks.bomLineId,
      lotNumber: lots.number,
      bin: bins.code,
      partId: lots.partId,
      partNumber: parts.number,
      quantity: picks.quantity,
      designators: picks.designators,
      alternateReason: picks.alternateReason,
    })
    .from(picks)
    .innerJoin(lots, eq(lots.id, picks.lotId))
    .innerJoin(parts, eq(parts.id, lots.partId))
    .leftJoin(bins, eq(bins.id, lots.binId))
    .where(and(eq(picks.unitId, unitId), isNull(picks.undoneByEntryId)))
    .orderBy(picks.id);
}

/** Of each line: what was issued to the batch, and what the finished kits of its other units have of it. */
async function readBatchCover(
  reader: Reader,
  unit: UnitOfKit,
  batchId: number,
  bom: readonly LineOfPart[],
): Promise<Map<number, { issued: number; taken: number }>> {
  const cover = new Map<number, { issued: number; taken: number }>();
  const at = (lineId: number) => {
    const found = cover.get(lineId) ?? { issued: 0, taken: 0 };
    cover.set(lineId, found);
    return found;
  };
  for (const [lineId, quantity] of await readIssued(reader, batchId)) at(lineId).issued += quantity;
  const others = await reader
    .select({ id: units.id, stage: units.stage, bomRevisionId: units.bomRevisionId, options: units.options })
    .from(units)
    .where(eq(units.batchId, batchId));
  for (const other of others) {
    if (other.id === unit.id || other.bomRevisionId !== unit.bomRevisionId) continue;
    if (!isPast('kit', other.stage)) continue;
    for (const { lineId, quantity } of resolvedOrRefused(bom, other.options)) at(lineId).taken += quantity;
  }
  return cover;
}

/** What was issued to a batch and not put back, by BOM line. */
export async function readIssued(reader: Reader, batchId: number): Promise<Map<number, number>> {
  const rows = await reader
    .select({ lineId: picks.bomLineId, quantity: picks.quantity })
    .from(picks)
    .where(and(eq(picks.batchId, batchId), isNull(picks.undoneByEntryId)));
  const issued = new Map<number, number>();
  for (const { lineId, quantity } of rows) {
    if (lineId !== null) issued.set(lineId, (issued.get(lineId) ?? 0) + quantity);
  }
  return issued;
}
