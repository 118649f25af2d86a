import { asc, isNull } from 'drizzle-orm';
import { closingProblem } from '~/domain/bench/daily-check';
import { checkReferences } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readCheckState } from '~/server/queries/bench/read-check-state';
import type { WriteContext } from '~/server/write';

/**
 * Refuses the closing of a run while a reference's newest check is bad and unexplained. The references stay locked
 * until the run is closed: a check at the same moment comes before or after it, and then flags it.
 *
 * @throws DomainError `conflict`, naming the references
 */
export async function mustHaveGoodChecks(w: WriteContext): Promise<void> {
  await w.tx
    .select({ id: checkReferences.id })
    .from(checkReferences)
    .where(isNull(checkReferences.retiredAt))
    .orderBy(asc(checkReferences.id))
    .for('update');
  const problem = closingProblem(await readCheckState(w.tx, w.now));
  if (problem !== null) throw new DomainError('conflict', problem);
}
