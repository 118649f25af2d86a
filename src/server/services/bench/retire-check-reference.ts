import { eq } from 'drizzle-orm';
import { checkReferences } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Gives a reference up: it is not asked for any more. Its checks, and the flags they raised, stay.
 *
 * @throws DomainError `not_found`; `conflict` where it is given up already
 */
export async function retireCheckReference(
  { checkReferenceId }: { checkReferenceId: number },
  ctx: Ctx,
): Promise<{ checkReferenceId: number; number: string }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx
      .select()
      .from(checkReferences)
      .where(eq(checkReferences.id, checkReferenceId))
      .for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such reference.');
    if (row.retiredAt !== null) throw new DomainError('conflict', `${row.number} is given up already.`);
    await w.tx
      .update(checkReferences)
      .set({ retiredAt: w.now })
      .where(eq(checkReferences.id, checkReferenceId));
    await w.record({
      action: 'check.retire',
      subjects: [{ type: 'check_reference', id: checkReferenceId }],
    });
    return { checkReferenceId, number: row.number };
  });
}
