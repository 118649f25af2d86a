import { asc, eq } from 'drizzle-orm';
import type { BomLine } from '~/domain/planning/resolve-bom';
import type { Reader } from '~/server/db/client';
import { bomLines, parts } from '~/server/db/schema';

/** A BOM line with what the floor needs to know of its part. */
export interface LineOfPart extends BomLine {
  partNumber: string;
  partDescription: string;
  partValue: string;
  partUnit: 'piece' | 'mm' | 'mg';
  trace: 'each' | 'batch';
}

/** The lines of a BOM revision in order of line number. */
export async function readBomLines(reader: Reader, bomRevisionId: number): Promise<LineOfPart[]> {
  return reader
    .select({
      id: bomLines.id,
      lineNo: bomLines.lineNo,
      partId: bomLines.partId,
      quantity: bomLines.quantity,
      designators: bomLines.designators,
      condition: bomLines.condition,
      scrapPercent: bomLines.scrapPercent,
      partNumber: parts.number,
      partDescription: parts.description,
      partValue: parts.value,
      partUnit: parts.unit,
      trace: parts.trace,
    })
    .from(bomLines)
    .innerJoin(parts, eq(parts.id, bomLines.partId))
    .where(eq(bomLines.bomRevisionId, bomRevisionId))
    .orderBy(asc(bomLines.lineNo));
}
