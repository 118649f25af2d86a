import { instrumentRevisions, instruments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { completeSpec, keepCertificate } from './instrument-entry';
import type { InstrumentEntry } from './instrument-entry';

const duplicate = 1062;

/**
 * Enters an instrument with its first revision.
 *
 * @throws DomainError `conflict` where the number is taken; `invalid`, `refused`, `too_large` for what cannot be used
 */
export async function createInstrument(
  input: InstrumentEntry & { number: string },
  ctx: Ctx,
): Promise<{ instrumentId: number; instrumentRevisionId: number; number: string }> {
  const { number, name, certificateFile } = input;
  return write(ctx, async (w) => {
    const spec = await completeSpec(w, input);
    const [{ insertId: instrumentId }] = await w.tx
      .insert(instruments)
      .values({ number, name })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        const sentence = `There is an instrument ${number} already.`;
        throw new DomainError('conflict', sentence, { number: sentence });
      });
    const calibrationFileId =
      certificateFile === undefined ? null : await keepCertificate(w, certificateFile);
    const [{ insertId: instrumentRevisionId }] = await w.tx
      .insert(instrumentRevisions)
      .values({ instrumentId, revision: 1, spec, calibrationFileId, createdAt: w.now });
    await w.record({
      action: 'instrument.create',
      subjects: [{ type: 'instrument', id: instrumentId }],
      details: { number, name, spec, calibrationFileId },
    });
    return { instrumentId, instrumentRevisionId, number };
  });
}
