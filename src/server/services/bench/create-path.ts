import type { NewPath } from '~/schemas/bench-equipment';
import { pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';

const duplicate = 1062;

/**
 * Enters a path with its first revision.
 *
 * @throws DomainError `conflict` where the number is taken
 */
export async function createPath(
  input: NewPath,
  ctx: Ctx,
): Promise<{ pathId: number; pathRevisionId: number; number: string }> {
  const { number, name, spec } = input;
  return write(ctx, async (w) => {
    const [{ insertId: pathId }] = await w.tx
      .insert(paths)
      .values({ number, name })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        const sentence = `There is a path ${number} already.`;
        throw new DomainError('conflict', sentence, { number: sentence });
      });
    const [{ insertId: pathRevisionId }] = await w.tx
      .insert(pathRevisions)
      .values({ pathId, revision: 1, spec, createdAt: w.now });
    await w.record({
      action: 'path.create',
      subjects: [{ type: 'path', id: pathId }],
      details: { number, name, spec },
    });
    return { pathId, pathRevisionId, number };
  });
}
