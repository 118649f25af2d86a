import { and, eq, isNull } from 'drizzle-orm';
import { listed } from '~/lib/listed';
import { pathPartRevisions, pathParts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listPathsHolding } from '~/server/queries/bench/list-paths-holding';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Takes a path part out of use.
 *
 * @throws DomainError `not_found`; `conflict` where it is out of use already or a path in use holds it
 */
export async function retirePathPart(
  { pathPartId }: { pathPartId: number },
  ctx: Ctx,
): Promise<{ pathPartId: number; number: string }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(pathParts).where(eq(pathParts.id, pathPartId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such path part.');
    const holding = await listPathsHolding(w.tx, row.number);
    if (holding.length > 0) {
      const names = listed(holding.map(({ number }) => number));
      throw new DomainError(
        'conflict',
        `${row.number} is part of ${names}. Take it out of there, or that out of use, first.`,
      );
    }
    const [done] = await w.tx
      .update(pathPartRevisions)
      .set({ retiredAt: w.now })
      .where(and(eq(pathPartRevisions.pathPartId, pathPartId), isNull(pathPartRevisions.retiredAt)));
    if (done.affectedRows === 0) throw new DomainError('conflict', `${row.number} is out of use already.`);
    await w.record({ action: 'path_part.retire', subjects: [{ type: 'path_part', id: pathPartId }] });
    return { pathPartId, number: row.number };
  });
}
