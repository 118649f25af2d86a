import { asc, isNull } from 'drizzle-orm';
import type { LimitRule } from '~/domain/bench/limit-rules';
import { SHIPPED_RULES } from '~/domain/bench/shipped-rules';
import { limitRuleSchema } from '~/schemas/bench-definitions';
import type { Reader } from '~/server/db/client';
import { limitRuleRevisions } from '~/server/db/schema';

/** All emission rules of the works, its own before those that ship. */
export async function listLimitRules(reader: Reader): Promise<readonly LimitRule[]> {
  const rows = await reader
    .select({ definition: limitRuleRevisions.definition })
    .from(limitRuleRevisions)
    .where(isNull(limitRuleRevisions.retiredAt))
    .orderBy(asc(limitRuleRevisions.key));
  return [...rows.map(({ definition }) => limitRuleSchema.parse(definition)), ...SHIPPED_RULES];
}
