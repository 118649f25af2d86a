import { eq } from 'drizzle-orm';
import { compareLetters, nextLetter } from '~/lib/revision-letters';
import { testPlanRevisions, testPoints } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockModel } from './lock-model';

const usualSupplyV = 13.8;
const usualLoadOhm = 50;

/**
 * Drafts the next test plan of a model as a copy of the newest one.
 *
 * @throws DomainError `not_found`; `conflict` where a draft is there already
 */
export async function draftTestPlan(
  input: { model: string },
  ctx: Ctx,
): Promise<{ testPlanRevisionId: number; letter: string }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const earlier = await w.tx
      .select()
      .from(testPlanRevisions)
      .where(eq(testPlanRevisions.modelId, model.id));
    earlier.sort((a, b) => compareLetters(a.letter, b.letter));
    const draft = earlier.find(({ state }) => state === 'draft');
    if (draft !== undefined) {
      throw new DomainError('conflict', `Test plan ${draft.letter} is a draft already: change that one.`);
    }
    const newest = earlier.at(-1);
    const letter = nextLetter(newest?.letter ?? null);
    const [{ insertId: testPlanRevisionId }] = await w.tx.insert(testPlanRevisions).values({
      ...{ modelId: model.id, letter, state: 'draft', createdAt: w.now },
      supplyV: newest?.supplyV ?? usualSupplyV,
      loadOhm: newest?.loadOhm ?? usualLoadOhm,
      outputStage: newest?.outputStage ?? null,
    });
    const points =
      newest === undefined
        ? []
        : await w.tx.select().from(testPoints).where(eq(testPoints.testPlanRevisionId, newest.id));
    if (points.length > 0) {
      await w.tx
        .insert(testPoints)
        .values(points.map(({ id: _, ...point }) => ({ ...point, testPlanRevisionId })));
    }
    await w.record({
      action: 'test_plan.draft',
      subjects: [
        { type: 'model', id: model.id },
        { type: 'test_plan_revision', id: testPlanRevisionId },
      ],
      details: { letter, from: newest?.letter ?? null, points: points.length },
    });
    return { testPlanRevisionId, letter };
  });
}
