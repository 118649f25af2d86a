import { and, eq, isNull, ne } from 'drizzle-orm';
import { models, quantityRevisions, testPlanRevisions, testPoints } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Takes a quantity of the works' own out of use.
 *
 * @throws DomainError `not_found`; `conflict` while a test plan that is not retired asks for it
 */
export async function retireQuantity(input: { key: string }, ctx: Ctx): Promise<{ key: string }> {
  const { key } = input;
  return write(ctx, async (w) => {
    const [present] = await w.tx
      .select({ id: quantityRevisions.id })
      .from(quantityRevisions)
      .where(and(eq(quantityRevisions.key, key), isNull(quantityRevisions.retiredAt)))
      .for('update');
    if (present === undefined) {
      throw new DomainError('not_found', `The works has no quantity ${key} of its own in use.`);
    }
    const [used] = await w.tx
      .select({ letter: testPlanRevisions.letter, model: models.name })
      .from(testPoints)
      .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, testPoints.testPlanRevisionId))
      .innerJoin(models, eq(models.id, testPlanRevisions.modelId))
      .where(and(eq(testPoints.quantityKey, key), ne(testPlanRevisions.state, 'retired')))
      .limit(1);
    if (used !== undefined) {
      throw new DomainError('conflict', `Test plan ${used.letter} of ${used.model} asks for ${key}.`);
    }
    await w.tx
      .update(quantityRevisions)
      .set({ retiredAt: w.now })
      .where(eq(quantityRevisions.id, present.id));
    await w.record({
      action: 'quantity.retire',
      subjects: [{ type: 'quantity_revision', id: present.id }],
      details: { key },
    });
    return { key };
  });
}
