import { desc, eq } from 'drizzle-orm';
import { pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { mustBeSeen } from './must-be-seen';
import { pictureOf } from './path-entry';
import type { PathEntry } from './path-entry';

/**
 * Gives a path its next revision, which is in use, and retires the one before; readings keep the one they were read
 * with.
 *
 * @throws DomainError `not_found`; `conflict` where somebody has revised it since; `refused` where a part is not in use
 */
export async function revisePath(
  input: PathEntry & { pathId: number; name: string; seen?: number | undefined },
  ctx: Ctx,
): Promise<{ pathId: number; pathRevisionId: number; number: string; revision: number }> {
  const { pathId, name } = input;
  return write(ctx, async (w) => {
    const spec = await pictureOf(w, input);
    const [row] = await w.tx.select().from(paths).where(eq(paths.id, pathId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such path.');
    const [before] = await w.tx
      .select()
      .from(pathRevisions)
      .where(eq(pathRevisions.pathId, pathId))
      .orderBy(desc(pathRevisions.revision))
      .limit(1);
    mustBeSeen(row.number, before?.revision ?? 0, input.seen);
    const revision = (before?.revision ?? 0) + 1;
    if (before?.retiredAt === null) {
      await w.tx.update(pathRevisions).set({ retiredAt: w.now }).where(eq(pathRevisions.id, before.id));
    }
    await w.tx.update(paths).set({ name }).where(eq(paths.id, pathId));
    const [{ insertId: pathRevisionId }] = await w.tx
      .insert(pathRevisions)
      .values({ pathId, revision, spec, createdAt: w.now });
    await w.record({
      action: 'path.revise',
      subjects: [{ type: 'path', id: pathId }],
      details: { revision, parts: spec.parts.map(({ partNumber, name: part }) => partNumber ?? part) },
    });
    return { pathId, pathRevisionId, number: row.number, revision };
  });
}
