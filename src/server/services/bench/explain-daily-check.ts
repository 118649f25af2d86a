import { eq } from 'drizzle-orm';
import { checkReferences, dailyChecks } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Says why a check was outside its band, and what was done; runs can be closed again then. The flags it raised stay
 * until the owner ends them.
 *
 * @throws DomainError `not_found`; `conflict` where the check was good or is explained already
 */
export async function explainDailyCheck(
  { dailyCheckId, explanation }: { dailyCheckId: number; explanation: string },
  ctx: Ctx,
): Promise<{ dailyCheckId: number; number: string }> {
  return write(ctx, async (w) => {
    const [check] = await w.tx
      .select()
      .from(dailyChecks)
      .where(eq(dailyChecks.id, dailyCheckId))
      .for('update');
    if (check === undefined) throw new DomainError('not_found', 'There is no such check.');
    const [reference] = await w.tx
      .select({ number: checkReferences.number })
      .from(checkReferences)
      .where(eq(checkReferences.id, check.checkReferenceId));
    const number = reference?.number ?? '';
    if (check.isGood) {
      throw new DomainError('conflict', `That check of ${number} was good: there is nothing to explain.`);
    }
    if (check.explainedAt !== null) {
      throw new DomainError('conflict', `That check of ${number} is explained already.`);
    }
    await w.tx
      .update(dailyChecks)
      .set({ explanation, explainedAt: w.now, explainedBy: actingPerson(w) })
      .where(eq(dailyChecks.id, dailyCheckId));
    await w.record({
      action: 'check.explain',
      subjects: [{ type: 'check_reference', id: check.checkReferenceId }],
      details: { explanation },
    });
    return { dailyCheckId, number };
  });
}
