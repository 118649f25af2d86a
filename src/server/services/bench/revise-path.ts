import { desc, eq } from 'drizzle-orm';
import type { PathRevision } from '~/schemas/bench-equipment';
import { pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Gives a path its next revision and retires the one before; readings keep the one they were read with.
 *
 * @throws DomainError `not_found`
 */
export async function revisePath(
  input: PathRevision & { pathId: number },
  ctx: Ctx,
): Promise<{ pathId: number; pathRevisionId: number; revision: number }> {
  const { pathId, name, spec } = input;
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(paths).where(eq(paths.id, pathId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such path.');
    const [before] = await w.tx
      .select()
      .from(pathRevisions)
      .where(eq(pathRevisions.pathId, pathId))
      .orderBy(desc(pathRevisions.revision))
      .limit(1);
    const revision = (before?.revision ?? 0) + 1;
    if (before !== undefined) {
      await w.tx.update(pathRevisions).set({ retiredAt: w.now }).where(eq(pathRevisions.id, before.id));
    }
    await w.tx.update(paths).set({ name }).where(eq(paths.id, pathId));
    const [{ insertId: pathRevisionId }] = await w.tx
      .insert(pathRevisions)
      .values({ pathId, revision, spec, createdAt: w.now });
    await w.record({
      action: 'path.revise',
      subjects: [{ type: 'path', id: pathId }],
      details: { revision, from: before?.spec ?? null, to: spec },
    });
    return { pathId, pathRevisionId, revision };
  });
}
