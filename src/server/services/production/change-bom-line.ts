import { and, eq } from 'drizzle-orm';
import { parseCondition } from '~/domain/planning/condition';
import type { BomLineChange } from '~/schemas/production-models';
import { bomLines, bomRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockModel } from './lock-model';

/**
 * Changes the quantity and the condition of a line of a draft BOM.
 *
 * @throws DomainError `not_found`, `conflict` where the revision is released, `refused` where the condition
 * cannot be read
 */
export async function changeBomLine(
  input: BomLineChange & { model: string; letter: string; lineNo: number },
  ctx: Ctx,
): Promise<{ letter: string; lineNo: number }> {
  return write(ctx, async (w) => {
    const { letter, lineNo, quantity, condition } = input;
    const model = await lockModel(w.tx, input.model);
    const [found] = await w.tx
      .select({ line: bomLines, state: bomRevisions.state })
      .from(bomLines)
      .innerJoin(bomRevisions, eq(bomRevisions.id, bomLines.bomRevisionId))
      .where(
        and(eq(bomRevisions.modelId, model.id), eq(bomRevisions.letter, letter), eq(bomLines.lineNo, lineNo)),
      );
    if (found === undefined)
      throw new DomainError('not_found', `BOM ${letter} of ${model.name} has no such line.`);
    if (found.state !== 'draft') {
      throw new DomainError(
        'conflict',
        `BOM ${letter} is ${found.state} and does not change; draft a new one.`,
      );
    }
    const parsed = condition === null ? null : parseCondition(condition);
    if (parsed?.ok === false) throw new DomainError('refused', parsed.reason, { condition: parsed.reason });
    await w.tx.update(bomLines).set({ quantity, condition }).where(eq(bomLines.id, found.line.id));
    await w.record({
      action: 'bom.change_line',
      subjects: [{ type: 'bom_revision', id: found.line.bomRevisionId }],
      details: {
        ...{ letter, lineNo },
        from: { quantity: found.line.quantity, condition: found.line.condition },
        to: { quantity, condition },
      },
    });
    return { letter, lineNo };
  });
}
