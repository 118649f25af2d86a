import { asc, desc, eq } from 'drizzle-orm';
import type { PathPart } from '~/domain/bench/types';
import { pathPartSchema } from '~/schemas/bench-specs';
import { pathPartRevisions, pathParts, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listPathsHolding } from '~/server/queries/bench/list-paths-holding';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { mustBeSeen } from './must-be-seen';
import { readPart } from './part-entry';
import type { PartEntry } from './part-entry';
import { revisePath } from './revise-path';

/**
 * Gives a path part its next revision, which is in use, and with it every path in use that holds the part: a path
 * is a picture of its parts, and readings keep the one they were read with.
 *
 * @throws DomainError `not_found`; `conflict` where somebody has revised it since; `refused`, `too_large` for a
 * table that cannot be used
 */
export async function revisePathPart(
  input: PartEntry & { pathPartId: number; seen?: number | undefined },
  ctx: Ctx,
): Promise<{ pathPartId: number; number: string; revision: number; paths: string[]; note: string }> {
  const { pathPartId, seen, ...entry } = input;
  return write(ctx, async (w) => {
    // Parts are locked before paths, here and where a path is made, so that no path keeps an old picture.
    const [row] = await w.tx.select().from(pathParts).where(eq(pathParts.id, pathPartId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such path part.');
    const [newest] = await w.tx
      .select()
      .from(pathPartRevisions)
      .where(eq(pathPartRevisions.pathPartId, pathPartId))
      .orderBy(desc(pathPartRevisions.revision))
      .limit(1);
    mustBeSeen(row.number, newest?.revision ?? 0, seen);
    const before = newest && { spec: pathPartSchema.parse(newest.spec), fileId: newest.fileId };
    const { spec, fileId, note } = await readPart(w, row.number, entry, before);
    const revision = (newest?.revision ?? 0) + 1;
    if (newest?.retiredAt === null) {
      await w.tx
        .update(pathPartRevisions)
        .set({ retiredAt: w.now })
        .where(eq(pathPartRevisions.id, newest.id));
    }
    await w.tx.update(pathParts).set({ name: entry.name }).where(eq(pathParts.id, pathPartId));
    await w.tx.insert(pathPartRevisions).values({ pathPartId, revision, spec, fileId, createdAt: w.now });
    await w.tx.select({ id: paths.id }).from(paths).orderBy(asc(paths.id)).for('update');
    const holding = await listPathsHolding(w.tx, row.number);
    for (const path of holding) {
      const parts = path.spec.parts.map((part): PathPart => (part.partNumber === row.number ? spec : part));
      await revisePath({ pathId: path.id, name: path.name, spec: { ...path.spec, parts } }, w);
    }
    await w.record({
      action: 'path_part.revise',
      subjects: [{ type: 'path_part', id: pathPartId }],
      details: { revision, rows: spec.loss.length, fileId, paths: holding.map(({ number }) => number) },
    });
    return { pathPartId, number: row.number, revision, paths: holding.map(({ number }) => number), note };
  });
}
