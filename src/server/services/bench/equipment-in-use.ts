import { and, eq, isNull } from 'drizzle-orm';
import type { InstrumentSpec, PathSpec } from '~/domain/bench/types';
import { instrumentSpecSchema, pathSpecSchema } from '~/schemas/bench-specs';
import { instrumentRevisions, pathRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { WriteContext } from '~/server/write';

/** By which revisions of instrument and path something was read; null where nothing was chosen. */
export interface Equipment {
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
}

/**
 * Instrument and path of a reading, and a check that both revisions are the present ones.
 *
 * @throws DomainError `refused`
 */
export async function mustBeInUse(
  w: WriteContext,
  { instrumentRevisionId, pathRevisionId }: Equipment,
): Promise<{ instrument: InstrumentSpec | null; path: PathSpec | null }> {
  let instrument: InstrumentSpec | null = null;
  if (instrumentRevisionId !== null) {
    const [found] = await w.tx
      .select({ spec: instrumentRevisions.spec })
      .from(instrumentRevisions)
      .where(and(eq(instrumentRevisions.id, instrumentRevisionId), isNull(instrumentRevisions.retiredAt)));
    if (found === undefined) {
      const sentence = 'The instrument has a newer revision. Choose it again.';
      throw new DomainError('refused', sentence, { instrumentRevisionId: sentence });
    }
    instrument = instrumentSpecSchema.parse(found.spec);
  }
  if (pathRevisionId === null) return { instrument, path: null };
  const [path] = await w.tx
    .select({ spec: pathRevisions.spec })
    .from(pathRevisions)
    .where(and(eq(pathRevisions.id, pathRevisionId), isNull(pathRevisions.retiredAt)));
  if (path === undefined) {
    const sentence = 'The path has a newer revision. Choose it again.';
    throw new DomainError('refused', sentence, { pathRevisionId: sentence });
  }
  return { instrument, path: pathSpecSchema.parse(path.spec) };
}
