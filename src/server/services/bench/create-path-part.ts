import { pathPartRevisions, pathParts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { readPart } from './part-entry';
import type { PartEntry } from './part-entry';

const duplicate = 1062;

/**
 * Enters a path part with its first revision.
 *
 * @throws DomainError `conflict` where the number is taken; `refused`, `too_large` for a table that cannot be used
 */
export async function createPathPart(
  input: PartEntry & { number: string },
  ctx: Ctx,
): Promise<{ pathPartId: number; number: string; note: string }> {
  const { number, ...entry } = input;
  return write(ctx, async (w) => {
    const [{ insertId: pathPartId }] = await w.tx
      .insert(pathParts)
      .values({ number, name: entry.name })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        const sentence = `There is a path part ${number} already.`;
        throw new DomainError('conflict', sentence, { number: sentence });
      });
    const { spec, fileId, note } = await readPart(w, number, entry);
    await w.tx.insert(pathPartRevisions).values({ pathPartId, revision: 1, spec, fileId, createdAt: w.now });
    await w.record({
      action: 'path_part.create',
      subjects: [{ type: 'path_part', id: pathPartId }],
      details: { number, name: entry.name, rows: spec.loss.length, fileId },
    });
    return { pathPartId, number, note };
  });
}
