import { asc, eq, isNull } from 'drizzle-orm';
import type { PathSpec } from '~/domain/bench/types';
import { pathSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import { pathRevisions, paths } from '~/server/db/schema';

/** The paths in use that hold a part, in the order in which they are locked. */
export async function listPathsHolding(
  reader: Reader,
  partNumber: string,
): Promise<{ id: number; number: string; name: string; spec: PathSpec }[]> {
  const rows = await reader
    .select({ id: paths.id, number: paths.number, name: paths.name, spec: pathRevisions.spec })
    .from(paths)
    .innerJoin(pathRevisions, eq(pathRevisions.pathId, paths.id))
    .where(isNull(pathRevisions.retiredAt))
    .orderBy(asc(paths.id));
  return rows
    .map(({ spec, ...row }) => ({ ...row, spec: pathSpecSchema.parse(spec) }))
    .filter(({ spec }) => spec.parts.some((part) => part.partNumber === partNumber));
}
