import { and, eq, isNull } from 'drizzle-orm';
import { limitRuleRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Takes an emission rule of the works' own out of use; runs that are open are judged by what counts then.
 *
 * @throws DomainError `not_found`
 */
export async function retireLimitRule(input: { key: string }, ctx: Ctx): Promise<{ key: string }> {
  return write(ctx, async (w) => {
    const [present] = await w.tx
      .select({ id: limitRuleRevisions.id })
      .from(limitRuleRevisions)
      .where(and(eq(limitRuleRevisions.key, input.key), isNull(limitRuleRevisions.retiredAt)))
      .for('update');
    if (present === undefined) {
      throw new DomainError('not_found', `The works has no rule ${input.key} of its own in use.`);
    }
    await w.tx
      .update(limitRuleRevisions)
      .set({ retiredAt: w.now })
      .where(eq(limitRuleRevisions.id, present.id));
    await w.record({
      action: 'limit_rule.retire',
      subjects: [{ type: 'limit_rule_revision', id: present.id }],
      details: { key: input.key },
    });
    return { key: input.key };
  });
}
