import { asc } from 'drizzle-orm';
import { matchParts } from '~/domain/planning/bom-import/match-parts';
import type { PartLine } from '~/domain/planning/bom-import/match-parts';
import { readBom } from '~/domain/planning/bom-import/read-bom';
import type { UnderstoodBom } from '~/domain/planning/bom-import/read-bom';
import type { Reader } from '~/server/db/client';
import { parts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readFile } from '~/server/queries/files/read-file';

export interface BomReading {
  /** Of the file. */
  name: string;
  lines: PartLine[];
  /** How many parts of the file are left out when the board is populated. */
  leftOut: number;
  questions: string[];
  understood: UnderstoodBom;
  /** Every part number of the books. */
  partNumbers: string[];
}

/**
 * Reads a kept bill of materials again and matches its lines with the parts of the books as they are now.
 *
 * @throws DomainError `not_found`, `refused` where the file is no bill of materials
 */
export async function readBomUpload(reader: Reader, fileId: number): Promise<BomReading> {
  const { bytes, name } = await readFile(reader, fileId);
  const read = readBom(bytes);
  if (!read.ok) throw new DomainError('refused', read.reason);
  const known = await reader
    .select({ number: parts.number, value: parts.value, footprint: parts.footprint })
    .from(parts)
    .orderBy(asc(parts.number));
  return {
    name,
    lines: matchParts(read.lines, known),
    leftOut: read.lines.filter(({ dnp }) => dnp).length,
    questions: read.questions,
    understood: read.understood,
    partNumbers: known.map(({ number }) => number),
  };
}
