import { and, desc, eq, isNull } from 'drizzle-orm';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { frequencyPlanSchema } from '~/schemas/frequency-plans';
import type { Reader } from '~/server/db/client';
import { frequencyPlanRevisions, models } from '~/server/db/schema';

interface FrequencyPlanRevision {
  revision: number;
  plan: FrequencyPlan;
  createdAt: Date;
  retiredAt: Date | null;
}

/** A model with the revisions of its frequency plan, newest first; null where there is no such model. */
export async function getFrequencyPlan(
  reader: Reader,
  slug: string,
): Promise<{ model: { slug: string; name: string }; revisions: FrequencyPlanRevision[] } | null> {
  const [model] = await reader
    .select({ id: models.id, slug: models.slug, name: models.name })
    .from(models)
    .where(eq(models.slug, slug));
  if (model === undefined) return null;
  const rows = await reader
    .select()
    .from(frequencyPlanRevisions)
    .where(eq(frequencyPlanRevisions.modelId, model.id))
    .orderBy(desc(frequencyPlanRevisions.revision));
  return {
    model: { slug: model.slug, name: model.name },
    revisions: rows.map(({ revision, plan, createdAt, retiredAt }) => ({
      ...{ revision, createdAt, retiredAt },
      plan: frequencyPlanSchema.parse(plan),
    })),
  };
}

/** The frequency plan of a model that is in use; null where it has none. */
export async function findFrequencyPlan(reader: Reader, modelId: number): Promise<FrequencyPlan | null> {
  const [row] = await reader
    .select({ plan: frequencyPlanRevisions.plan })
    .from(frequencyPlanRevisions)
    .where(and(eq(frequencyPlanRevisions.modelId, modelId), isNull(frequencyPlanRevisions.retiredAt)))
    .orderBy(desc(frequencyPlanRevisions.revision))
    .limit(1);
  return row === undefined ? null : frequencyPlanSchema.parse(row.plan);
}
