import { and, desc, eq, isNull } from 'drizzle-orm';
import { STRICTEST } from '~/domain/bench/limit-rules';
import type { LimitRule } from '~/domain/bench/limit-rules';
import { SHIPPED_RULES } from '~/domain/bench/shipped-rules';
import type { LimitRuleEdit } from '~/schemas/definitions-edit';
import { limitRuleRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';

const duplicate = 1062;
const hzPerMhz = 1e6;

/**
 * Adds an emission rule of the works' own, or makes its next revision. How sure one is of its text is *entered*: the works
 * answers for it. Closed runs keep the limits that they were judged by.
 *
 * @throws DomainError `conflict` where the key ships or is taken, or somebody else has changed it meanwhile
 */
export async function reviseLimitRule(
  input: LimitRuleEdit,
  ctx: Ctx,
): Promise<{ key: string; revision: number }> {
  const { basedOn, clauses, ...rest } = input;
  const { key } = rest;
  if (key === STRICTEST || SHIPPED_RULES.some((rule) => rule.key === key)) {
    const sentence = `${key} ships with the program; choose another key.`;
    throw new DomainError('conflict', sentence, { key: sentence });
  }
  const definition: LimitRule = {
    ...rest,
    certainty: 'entered',
    clauses: clauses.map(({ fromMhz, toMhz, ...clause }) => ({
      ...clause,
      certainty: 'entered',
      fromHz: fromMhz === null ? null : fromMhz * hzPerMhz,
      toHz: toMhz === null ? null : toMhz * hzPerMhz,
    })),
  };
  return write(ctx, async (w) => {
    const [newest] = await w.tx
      .select({ revision: limitRuleRevisions.revision })
      .from(limitRuleRevisions)
      .where(eq(limitRuleRevisions.key, key))
      .orderBy(desc(limitRuleRevisions.revision))
      .limit(1)
      .for('update');
    const present = newest?.revision ?? 0;
    if (present !== basedOn) throw basedOn > 0 ? changedMeanwhile(key) : keyTaken(key);
    const revision = basedOn + 1;
    await w.tx
      .update(limitRuleRevisions)
      .set({ retiredAt: w.now })
      .where(and(eq(limitRuleRevisions.key, key), isNull(limitRuleRevisions.retiredAt)));
    const [{ insertId: id }] = await w.tx
      .insert(limitRuleRevisions)
      .values({ key, revision, definition, createdAt: w.now })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        throw changedMeanwhile(key);
      });
    await w.record({
      action: basedOn === 0 ? 'limit_rule.add' : 'limit_rule.revise',
      subjects: [{ type: 'limit_rule_revision', id }],
      details: { key, revision, title: definition.title, destinations: [...definition.destinations] },
    });
    return { key, revision };
  });
}

function changedMeanwhile(key: string): DomainError {
  return new DomainError('conflict', `Somebody else has changed ${key} meanwhile. Look at it again.`);
}

function keyTaken(key: string): DomainError {
  const sentence = `There is a rule ${key} already; revise that one, or choose another key.`;
  return new DomainError('conflict', sentence, { key: sentence });
}
