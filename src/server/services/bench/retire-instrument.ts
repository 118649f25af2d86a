import { and, eq, isNull } from 'drizzle-orm';
import { listed } from '~/lib/listed';
import { checkReferences, instrumentRevisions, instruments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Takes an instrument out of use: it cannot be chosen any more; readings keep the revision they were read with.
 *
 * @throws DomainError `not_found`; `conflict` where it is out of use already or a check reference needs it
 */
export async function retireInstrument(
  { instrumentId }: { instrumentId: number },
  ctx: Ctx,
): Promise<{ instrumentId: number; number: string }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(instruments).where(eq(instruments.id, instrumentId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such instrument.');
    const needing = await w.tx
      .select({ number: checkReferences.number })
      .from(checkReferences)
      .where(and(eq(checkReferences.instrumentId, instrumentId), isNull(checkReferences.retiredAt)));
    if (needing.length > 0) {
      const names = listed(needing.map(({ number }) => number));
      throw new DomainError(
        'conflict',
        `${row.number} measures ${names} in the daily check. Give that reference up first.`,
      );
    }
    const [done] = await w.tx
      .update(instrumentRevisions)
      .set({ retiredAt: w.now })
      .where(and(eq(instrumentRevisions.instrumentId, instrumentId), isNull(instrumentRevisions.retiredAt)));
    if (done.affectedRows === 0) {
      throw new DomainError('conflict', `${row.number} is out of use already.`);
    }
    await w.record({ action: 'instrument.retire', subjects: [{ type: 'instrument', id: instrumentId }] });
    return { instrumentId, number: row.number };
  });
}
