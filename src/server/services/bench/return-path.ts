import { desc, eq } from 'drizzle-orm';
import { pathSpecSchema } from '~/schemas/bench-specs';
import { pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { revisePath } from './revise-path';

/**
 * Puts a path back in use with a revision of the same parts as they are now.
 *
 * @throws DomainError `not_found`; `conflict` where it is in use; `refused` where one of its parts is not
 */
export async function returnPath(
  { pathId }: { pathId: number },
  ctx: Ctx,
): Promise<{ pathId: number; number: string; revision: number }> {
  return write(ctx, async (w) => {
    const [newest] = await w.tx
      .select({
        name: paths.name,
        number: paths.number,
        retiredAt: pathRevisions.retiredAt,
        spec: pathRevisions.spec,
      })
      .from(paths)
      .innerJoin(pathRevisions, eq(pathRevisions.pathId, paths.id))
      .where(eq(paths.id, pathId))
      .orderBy(desc(pathRevisions.revision))
      .limit(1);
    if (newest === undefined) throw new DomainError('not_found', 'There is no such path.');
    if (newest.retiredAt === null) throw new DomainError('conflict', `${newest.number} is in use already.`);
    const spec = pathSpecSchema.parse(newest.spec);
    const numbers = spec.parts.flatMap(({ partNumber }) => (partNumber === null ? [] : [partNumber]));
    // Parts that are not of the list have no newer state to take.
    const entry =
      numbers.length === spec.parts.length ? { direction: spec.direction, parts: numbers } : { spec };
    const { revision } = await revisePath({ pathId, name: newest.name, ...entry }, w);
    await w.record({
      action: 'path.return',
      subjects: [{ type: 'path', id: pathId }],
      details: { revision },
    });
    return { pathId, number: newest.number, revision };
  });
}
