import { asc, desc, eq, sql } from 'drizzle-orm';
import { pathSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import { models, pathRevisions, paths } from '~/server/db/schema';

/** Every path by its newest revision, those in use first. */
export async function listEveryPath(reader: Reader) {
  const rows = await reader
    .select({
      id: paths.id,
      number: paths.number,
      name: paths.name,
      revision: pathRevisions.revision,
      retiredAt: pathRevisions.retiredAt,
      spec: pathRevisions.spec,
    })
    .from(paths)
    .innerJoin(pathRevisions, eq(pathRevisions.pathId, paths.id))
    .where(
      eq(
        pathRevisions.revision,
        sql`(select max(newest.revision) from path_revisions newest where newest.path_id = ${paths.id})`,
      ),
    )
    .orderBy(sql`${pathRevisions.retiredAt} is not null`, asc(paths.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: pathSpecSchema.parse(spec) }));
}

/** A path with its revisions, newest first, and the models whose power it has to stand; null where there is none. */
export async function getSignalPath(reader: Reader, number: string) {
  const [path] = await reader.select().from(paths).where(eq(paths.number, number.toUpperCase()));
  if (path === undefined) return null;
  const [rows, rated] = await Promise.all([
    reader
      .select({
        revision: pathRevisions.revision,
        createdAt: pathRevisions.createdAt,
        retiredAt: pathRevisions.retiredAt,
        spec: pathRevisions.spec,
      })
      .from(pathRevisions)
      .where(eq(pathRevisions.pathId, path.id))
      .orderBy(desc(pathRevisions.revision)),
    reader
      .select({ name: models.name, ratedPowerW: models.ratedPowerW })
      .from(models)
      .orderBy(asc(models.name)),
  ]);
  const revisions = rows.map(({ spec, ...row }) => ({ ...row, spec: pathSpecSchema.parse(spec) }));
  const [newest] = revisions;
  return newest === undefined ? null : { ...path, newest, revisions, models: rated };
}
