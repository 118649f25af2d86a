import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import type { PathPart, PathSpec } from '~/domain/bench/types';
import { pathPartSchema } from '~/schemas/bench-specs';
import { pathPartRevisions, pathParts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { WriteContext } from '~/server/write';

/** What a path is made of: numbers of parts in order, or a whole specification where there are no such parts. */
export type PathEntry = { direction: PathSpec['direction']; parts: readonly string[] } | { spec: PathSpec };

/**
 * A picture of a path's parts as they are now. Locks the parts, which comes before locking a path: whoever revises a
 * part at the same time finds the path.
 *
 * @throws DomainError `refused` where a part is not in use
 */
export async function pictureOf(w: WriteContext, entry: PathEntry): Promise<PathSpec> {
  if ('spec' in entry) return entry.spec;
  const { direction, parts: numbers } = entry;
  const found = new Map<string, PathPart>();
  if (numbers.length > 0) {
    await w.tx
      .select({ id: pathParts.id })
      .from(pathParts)
      .where(inArray(pathParts.number, [...numbers]))
      .orderBy(asc(pathParts.id))
      .for('update');
    const rows = await w.tx
      .select({ number: pathParts.number, spec: pathPartRevisions.spec })
      .from(pathParts)
      .innerJoin(pathPartRevisions, eq(pathPartRevisions.pathPartId, pathParts.id))
      .where(and(inArray(pathParts.number, [...numbers]), isNull(pathPartRevisions.retiredAt)));
    for (const { number, spec } of rows) found.set(number, pathPartSchema.parse(spec));
  }
  const parts = numbers.map((number, index): PathPart => {
    const part = found.get(number);
    if (part !== undefined) return part;
    const sentence = `${number} is no path part in use. Choose one of the list.`;
    throw new DomainError('refused', sentence, { [`parts.${index}`]: sentence });
  });
  return { direction, parts };
}
