import { and, eq } from 'drizzle-orm';
import { stepRecords, works } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingPerson } from '~/server/write';
import type { WriteContext } from '~/server/write';

/**
 * Refuses a tester who built the unit, where the works asks for two pairs of hands.
 *
 * @throws DomainError `forbidden`
 */
export async function mustBeAllowedToTest(
  w: WriteContext,
  unit: { id: number; serial: string },
): Promise<void> {
  const [rule] = await w.tx.select({ apart: works.testerIsNotBuilder }).from(works).limit(1);
  if (rule?.apart !== true) return;
  const [built] = await w.tx
    .select({ id: stepRecords.id })
    .from(stepRecords)
    .where(and(eq(stepRecords.unitId, unit.id), eq(stepRecords.byUserId, actingPerson(w))))
    .limit(1);
  if (built !== undefined) {
    throw new DomainError('forbidden', `You built ${unit.serial}; this works asks that another tests it.`);
  }
}
