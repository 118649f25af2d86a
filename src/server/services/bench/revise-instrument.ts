import { desc, eq } from 'drizzle-orm';
import type { InstrumentRevision } from '~/schemas/bench-equipment';
import { instrumentRevisions, instruments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Gives an instrument its next revision and retires the one before; readings keep the one they were read with.
 *
 * @throws DomainError `not_found`
 */
export async function reviseInstrument(
  input: InstrumentRevision & { instrumentId: number },
  ctx: Ctx,
): Promise<{ instrumentId: number; instrumentRevisionId: number; revision: number }> {
  const { instrumentId, name, spec } = input;
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(instruments).where(eq(instruments.id, instrumentId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such instrument.');
    const [before] = await w.tx
      .select()
      .from(instrumentRevisions)
      .where(eq(instrumentRevisions.instrumentId, instrumentId))
      .orderBy(desc(instrumentRevisions.revision))
      .limit(1);
    const revision = (before?.revision ?? 0) + 1;
    if (before !== undefined) {
      await w.tx
        .update(instrumentRevisions)
        .set({ retiredAt: w.now })
        .where(eq(instrumentRevisions.id, before.id));
    }
    await w.tx.update(instruments).set({ name }).where(eq(instruments.id, instrumentId));
    const [{ insertId: instrumentRevisionId }] = await w.tx
      .insert(instrumentRevisions)
      .values({ instrumentId, revision, spec, createdAt: w.now });
    await w.record({
      action: 'instrument.revise',
      subjects: [{ type: 'instrument', id: instrumentId }],
      details: { revision, from: before?.spec ?? null, to: spec },
    });
    return { instrumentId, instrumentRevisionId, revision };
  });
}
