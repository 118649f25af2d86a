import type { NewInstrument } from '~/schemas/bench-equipment';
import { instrumentRevisions, instruments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';

const duplicate = 1062;

/**
 * Enters an instrument with its first revision.
 *
 * @throws DomainError `conflict` where the number is taken
 */
export async function createInstrument(
  input: NewInstrument,
  ctx: Ctx,
): Promise<{ instrumentId: number; instrumentRevisionId: number; number: string }> {
  const { number, name, spec } = input;
  return write(ctx, async (w) => {
    const [{ insertId: instrumentId }] = await w.tx
      .insert(instruments)
      .values({ number, name })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        const sentence = `There is an instrument ${number} already.`;
        throw new DomainError('conflict', sentence, { number: sentence });
      });
    const [{ insertId: instrumentRevisionId }] = await w.tx
      .insert(instrumentRevisions)
      .values({ instrumentId, revision: 1, spec, createdAt: w.now });
    await w.record({
      action: 'instrument.create',
      subjects: [{ type: 'instrument', id: instrumentId }],
      details: { number, name, spec },
    });
    return { instrumentId, instrumentRevisionId, number };
  });
}
