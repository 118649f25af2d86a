import { and, eq, isNull } from 'drizzle-orm';
import { instrumentRevisions, instruments, pathRevisions, paths } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { WriteContext } from '~/server/write';
import type { Equipment } from './equipment-in-use';

/**
 * The present revisions of an instrument and a path by their numbers.
 *
 * @throws DomainError `refused` with field `instrument` or `path`
 */
export async function equipmentByNumber(
  w: WriteContext,
  named: { instrument: string; path: string | null },
): Promise<Equipment> {
  const [instrument] = await w.tx
    .select({ id: instrumentRevisions.id })
    .from(instruments)
    .innerJoin(instrumentRevisions, eq(instrumentRevisions.instrumentId, instruments.id))
    .where(and(eq(instruments.number, named.instrument), isNull(instrumentRevisions.retiredAt)));
  if (instrument === undefined) throw unknown('instrument', named.instrument);
  if (named.path === null) return { instrumentRevisionId: instrument.id, pathRevisionId: null };
  const [path] = await w.tx
    .select({ id: pathRevisions.id })
    .from(paths)
    .innerJoin(pathRevisions, eq(pathRevisions.pathId, paths.id))
    .where(and(eq(paths.number, named.path), isNull(pathRevisions.retiredAt)));
  if (path === undefined) throw unknown('path', named.path);
  return { instrumentRevisionId: instrument.id, pathRevisionId: path.id };
}

function unknown(what: 'instrument' | 'path', number: string): DomainError {
  const sentence = `No ${what} in use has the number ${number}. The page of instruments lists them.`;
  return new DomainError('refused', sentence, { [what]: sentence });
}
