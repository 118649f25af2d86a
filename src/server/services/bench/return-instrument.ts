import { desc, eq } from 'drizzle-orm';
import { instrumentRevisions, instruments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Puts an instrument back in use with a revision that says what its newest one says.
 *
 * @throws DomainError `not_found`; `conflict` where it is in use
 */
export async function returnInstrument(
  { instrumentId }: { instrumentId: number },
  ctx: Ctx,
): Promise<{ instrumentId: number; number: string; revision: number }> {
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(instruments).where(eq(instruments.id, instrumentId)).for('update');
    const [newest] = await w.tx
      .select()
      .from(instrumentRevisions)
      .where(eq(instrumentRevisions.instrumentId, instrumentId))
      .orderBy(desc(instrumentRevisions.revision))
      .limit(1);
    if (row === undefined || newest === undefined) {
      throw new DomainError('not_found', 'There is no such instrument.');
    }
    if (newest.retiredAt === null) throw new DomainError('conflict', `${row.number} is in use already.`);
    const revision = newest.revision + 1;
    const { spec, calibrationFileId } = newest;
    await w.tx
      .insert(instrumentRevisions)
      .values({ instrumentId, revision, spec, calibrationFileId, createdAt: w.now });
    await w.record({
      action: 'instrument.return',
      subjects: [{ type: 'instrument', id: instrumentId }],
      details: { revision },
    });
    return { instrumentId, number: row.number, revision };
  });
}
