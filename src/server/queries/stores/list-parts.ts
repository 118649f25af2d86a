import { and, asc, count, desc, eq, inArray, like, or, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { bomLines, bomRevisions, lots, models, parts } from '~/server/db/schema';

export interface PartRow {
  number: string;
  description: string;
  value: string;
  footprint: string;
  unit: 'piece' | 'mm' | 'mg';
  trace: 'each' | 'batch';
  /** In usable lots. */
  usable: number;
  /** In all lots, waiting and barred ones too. */
  onHand: number;
  /** Of what is on hand, at its lots' cost; null where no lot has one. */
  valueMinor: number | null;
  /** Names of the models whose released BOMs have it. */
  usedIn: string[];
}

export const partsPerPage = 50;

/** What the parts can be ordered by. */
const orders = {
  number: parts.number,
  description: parts.description,
  usable: sql`usable`,
  onHand: sql`on_hand_sum`,
} as const;

interface Wanted {
  /** Searches number, description and value. */
  q?: string | undefined;
  page: number;
  sort: keyof typeof orders;
  desc: boolean;
}

/** The parts of the books, a page of them. */
export async function listParts(
  reader: Reader,
  { q, page, sort, desc: descending }: Wanted,
): Promise<{ rows: PartRow[]; total: number }> {
  const where = q === undefined ? undefined : matches(q);
  const [found, counted] = await Promise.all([
    reader
      .select({
        id: parts.id,
        number: parts.number,
        description: parts.description,
        value: parts.value,
        footprint: parts.footprint,
        unit: parts.unit,
        trace: parts.trace,
        onHand: sql<string>`coalesce(sum(${lots.onHand}), 0)`.as('on_hand_sum'),
        usable: sql<string>`coalesce(sum(if(${lots.state} = 'usable', ${lots.onHand}, 0)), 0)`.as('usable'),
        valueMinor: sql<
          string | null
        >`sum(round(${lots.costMinor} * ${lots.onHand} / ${lots.quantityReceived}))`,
      })
      .from(parts)
      .leftJoin(lots, eq(lots.partId, parts.id))
      .where(where)
      .groupBy(parts.id)
      .orderBy((descending ? desc : asc)(orders[sort]), asc(parts.number))
      .limit(partsPerPage)
      .offset((page - 1) * partsPerPage),
    reader.select({ n: count() }).from(parts).where(where),
  ]);
  const usedIn = await readUsedIn(
    reader,
    found.map(({ id }) => id),
  );
  const rows = found.map(({ id, onHand, usable, valueMinor, ...row }) => ({
    ...row,
    onHand: Number(onHand),
    usable: Number(usable),
    valueMinor: valueMinor === null ? null : Number(valueMinor),
    usedIn: usedIn.get(id) ?? [],
  }));
  return { rows, total: counted[0]?.n ?? 0 };
}

/** Every word must be found, in any of the columns. */
function matches(q: string) {
  const words = q.split(/\s+/).filter((word) => word !== '');
  return and(
    ...words.map((word) => {
      const pattern = `%${word.replaceAll(/[%_\\]/g, '\\$&')}%`;
      return or(
        like(sql`lower(${parts.number})`, pattern.toLowerCase()),
        like(parts.description, pattern),
        like(parts.value, pattern),
      );
    }),
  );
}

async function readUsedIn(reader: Reader, partIds: readonly number[]): Promise<Map<number, string[]>> {
  const used = new Map<number, string[]>();
  if (partIds.length === 0) return used;
  const rows = await reader
    .selectDistinct({ partId: bomLines.partId, model: models.name })
    .from(bomLines)
    .innerJoin(bomRevisions, eq(bomRevisions.id, bomLines.bomRevisionId))
    .innerJoin(models, eq(models.id, bomRevisions.modelId))
    .where(and(inArray(bomLines.partId, [...partIds]), eq(bomRevisions.state, 'released')))
    .orderBy(asc(models.name));
  for (const { partId, model } of rows) used.set(partId, [...(used.get(partId) ?? []), model]);
  return used;
}
