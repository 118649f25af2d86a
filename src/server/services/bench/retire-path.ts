import { and, eq, isNull } from 'drizzle-orm';
import { listed } from '~/lib/listed';
import { checkReferences, pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Takes a path out of use: it cannot be chosen any more; readings keep the revision they were read with.
 *
 * @throws DomainError `not_found`; `conflict` where it is out of use already or a check reference needs it
 */
export async function retirePath(
  { pathId }: { pathId: number },
  ctx: Ctx,
): Promise<{ pathId: number; number: string }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(paths).where(eq(paths.id, pathId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such path.');
    const needing = await w.tx
      .select({ number: checkReferences.number })
      .from(checkReferences)
      .where(and(eq(checkReferences.pathId, pathId), isNull(checkReferences.retiredAt)));
    if (needing.length > 0) {
      const names = listed(needing.map(({ number }) => number));
      throw new DomainError(
        'conflict',
        `${names} is measured through ${row.number} in the daily check. Give that reference up first.`,
      );
    }
    const [done] = await w.tx
      .update(pathRevisions)
      .set({ retiredAt: w.now })
      .where(and(eq(pathRevisions.pathId, pathId), isNull(pathRevisions.retiredAt)));
    if (done.affectedRows === 0) throw new DomainError('conflict', `${row.number} is out of use already.`);
    await w.record({ action: 'path.retire', subjects: [{ type: 'path', id: pathId }] });
    return { pathId, number: row.number };
  });
}
