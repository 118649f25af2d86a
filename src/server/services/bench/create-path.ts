import { pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { pictureOf } from './path-entry';
import type { PathEntry } from './path-entry';

const duplicate = 1062;

/**
 * Enters a path with its first revision, a picture of its parts as they are now.
 *
 * @throws DomainError `conflict` where the number is taken; `refused` where a part is not in use
 */
export async function createPath(
  input: PathEntry & { number: string; name: string },
  ctx: Ctx,
): Promise<{ pathId: number; pathRevisionId: number; number: string }> {
  const { number, name } = input;
  return write(ctx, async (w) => {
    const spec = await pictureOf(w, input);
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
      details: { number, name, parts: spec.parts.map(({ partNumber, name: part }) => partNumber ?? part) },
    });
    return { pathId, pathRevisionId, number };
  });
}
