import { and, desc, eq, isNull } from 'drizzle-orm';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { frequencyPlanRevisions, models } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { mustBeSeen } from './must-be-seen';

interface Input {
  /** The model's slug. */
  model: string;
  plan: FrequencyPlan;
  /** Newest revision when the form was filled in. */
  seen?: number | undefined;
}

/**
 * Gives a model the next revision of its frequency plan, by which products of its sweeps are named from now on;
 * sweeps that were read keep the names they were given.
 *
 * @throws DomainError `not_found`; `conflict` where somebody has revised it since
 */
export async function reviseFrequencyPlan(
  { model, plan, seen }: Input,
  ctx: Ctx,
): Promise<{ model: string; revision: number }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(models).where(eq(models.slug, model)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such model.');
    const [before] = await w.tx
      .select()
      .from(frequencyPlanRevisions)
      .where(eq(frequencyPlanRevisions.modelId, row.id))
      .orderBy(desc(frequencyPlanRevisions.revision))
      .limit(1);
    mustBeSeen(`the frequency plan of ${row.name}`, before?.revision ?? 0, seen);
    const revision = (before?.revision ?? 0) + 1;
    await w.tx
      .update(frequencyPlanRevisions)
      .set({ retiredAt: w.now })
      .where(and(eq(frequencyPlanRevisions.modelId, row.id), isNull(frequencyPlanRevisions.retiredAt)));
    await w.tx.insert(frequencyPlanRevisions).values({ modelId: row.id, revision, plan, createdAt: w.now });
    await w.record({
      action: 'frequency_plan.revise',
      subjects: [{ type: 'model', id: row.id }],
      details: { revision, from: before?.plan ?? null, to: plan },
    });
    return { model, revision };
  });
}
