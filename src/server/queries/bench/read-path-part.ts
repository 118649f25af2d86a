import { and, asc, desc, eq, sql } from 'drizzle-orm';
import { pathPartSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import { files, pathPartRevisions, pathParts } from '~/server/db/schema';
import { listPathsHolding } from './list-paths-holding';

/** Every path part by its newest revision, those in use first. */
export async function listPathParts(reader: Reader) {
  const rows = await reader
    .select({
      id: pathParts.id,
      number: pathParts.number,
      name: pathParts.name,
      revision: pathPartRevisions.revision,
      retiredAt: pathPartRevisions.retiredAt,
      spec: pathPartRevisions.spec,
    })
    .from(pathParts)
    .innerJoin(pathPartRevisions, eq(pathPartRevisions.pathPartId, pathParts.id))
    .where(
      eq(
        pathPartRevisions.revision,
        sql`(select max(newest.revision) from path_part_revisions newest where newest.path_part_id = ${pathParts.id})`,
      ),
    )
    .orderBy(sql`${pathPartRevisions.retiredAt} is not null`, asc(pathParts.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: pathPartSchema.parse(spec) }));
}

/** A path part with its revisions, newest first, and the paths in use that hold it; null where there is none. */
export async function getPathPart(reader: Reader, number: string) {
  const [part] = await reader.select().from(pathParts).where(eq(pathParts.number, number.toUpperCase()));
  if (part === undefined) return null;
  const [rows, holding] = await Promise.all([
    reader
      .select({
        revision: pathPartRevisions.revision,
        createdAt: pathPartRevisions.createdAt,
        retiredAt: pathPartRevisions.retiredAt,
        spec: pathPartRevisions.spec,
        fileName: files.name,
      })
      .from(pathPartRevisions)
      .leftJoin(files, eq(files.id, pathPartRevisions.fileId))
      .where(eq(pathPartRevisions.pathPartId, part.id))
      .orderBy(desc(pathPartRevisions.revision)),
    listPathsHolding(reader, part.number),
  ]);
  const revisions = rows.map(({ spec, ...row }) => ({ ...row, spec: pathPartSchema.parse(spec) }));
  const [newest] = revisions;
  return newest === undefined ? null : { ...part, newest, revisions, holding };
}

/** The file that a revision's table was read from; null where it was typed. */
export async function findLossFile(
  reader: Reader,
  pathPartId: number,
  revision: number,
): Promise<number | null> {
  const [row] = await reader
    .select({ fileId: pathPartRevisions.fileId })
    .from(pathPartRevisions)
    .where(and(eq(pathPartRevisions.pathPartId, pathPartId), eq(pathPartRevisions.revision, revision)));
  return row?.fileId ?? null;
}
