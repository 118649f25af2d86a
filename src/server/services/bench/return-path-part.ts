import { desc, eq } from 'drizzle-orm';
import { pathPartRevisions, pathParts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Puts a path part back in use with a revision that says what its newest one says.
 *
 * @throws DomainError `not_found`; `conflict` where it is in use
 */
export async function returnPathPart(
  { pathPartId }: { pathPartId: number },
  ctx: Ctx,
): Promise<{ pathPartId: number; number: string; revision: number }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(pathParts).where(eq(pathParts.id, pathPartId)).for('update');
    const [newest] = await w.tx
      .select()
      .from(pathPartRevisions)
      .where(eq(pathPartRevisions.pathPartId, pathPartId))
      .orderBy(desc(pathPartRevisions.revision))
      .limit(1);
    if (row === undefined || newest === undefined) {
      throw new DomainError('not_found', 'There is no such path part.');
    }
    if (newest.retiredAt === null) throw new DomainError('conflict', `${row.number} is in use already.`);
    const { spec, fileId } = newest;
    const revision = newest.revision + 1;
    await w.tx.insert(pathPartRevisions).values({ pathPartId, revision, spec, fileId, createdAt: w.now });
    await w.record({
      action: 'path_part.return',
      subjects: [{ type: 'path_part', id: pathPartId }],
      details: { revision },
    });
    return { pathPartId, number: row.number, revision };
  });
}
