import { asc, eq, isNull } from 'drizzle-orm';
import { instrumentSpecSchema, pathSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import { instrumentRevisions, instruments, pathRevisions, paths } from '~/server/db/schema';

/** Instruments in use, each with its present revision. */
export async function listInstruments(reader: Reader) {
  const rows = await reader
    .select({
      id: instruments.id,
      revisionId: instrumentRevisions.id,
      number: instruments.number,
      name: instruments.name,
      revision: instrumentRevisions.revision,
      spec: instrumentRevisions.spec,
    })
    .from(instruments)
    .innerJoin(instrumentRevisions, eq(instrumentRevisions.instrumentId, instruments.id))
    .where(isNull(instrumentRevisions.retiredAt))
    .orderBy(asc(instruments.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: instrumentSpecSchema.parse(spec) }));
}

/** Paths in use, each with its present revision. */
export async function listPaths(reader: Reader) {
  const rows = await reader
    .select({
      id: paths.id,
      revisionId: pathRevisions.id,
      number: paths.number,
      name: paths.name,
      revision: pathRevisions.revision,
      spec: pathRevisions.spec,
    })
    .from(paths)
    .innerJoin(pathRevisions, eq(pathRevisions.pathId, paths.id))
    .where(isNull(pathRevisions.retiredAt))
    .orderBy(asc(paths.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: pathSpecSchema.parse(spec) }));
}
