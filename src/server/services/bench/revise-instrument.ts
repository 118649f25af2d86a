import { desc, eq } from 'drizzle-orm';
import type { InstrumentSpec } from '~/domain/bench/types';
import { instrumentSpecSchema } from '~/schemas/bench-specs';
import { instrumentRevisions, instruments } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { completeSpec, keepCertificate } from './instrument-entry';
import type { InstrumentEntry } from './instrument-entry';
import { mustBeSeen } from './must-be-seen';

/**
 * Gives an instrument its next revision, which is in use, and retires the one before; readings keep the one they
 * were read with. The file of its calibration goes on while the calibration is the same.
 *
 * @throws DomainError `not_found`; `conflict` where somebody has revised it since; `invalid`, `refused`,
 * `too_large` for what cannot be used
 */
export async function reviseInstrument(
  input: InstrumentEntry & { instrumentId: number; seen?: number | undefined },
  ctx: Ctx,
): Promise<{ instrumentId: number; instrumentRevisionId: number; number: string; revision: number }> {
  const { instrumentId, name, certificateFile } = input;
  return write(ctx, async (w) => {
    const [row] = await w.tx.select().from(instruments).where(eq(instruments.id, instrumentId)).for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such instrument.');
    const spec = await completeSpec(w, input);
    const [before] = await w.tx
      .select()
      .from(instrumentRevisions)
      .where(eq(instrumentRevisions.instrumentId, instrumentId))
      .orderBy(desc(instrumentRevisions.revision))
      .limit(1);
    mustBeSeen(row.number, before?.revision ?? 0, input.seen);
    const revision = (before?.revision ?? 0) + 1;
    if (before?.retiredAt === null) {
      await w.tx
        .update(instrumentRevisions)
        .set({ retiredAt: w.now })
        .where(eq(instrumentRevisions.id, before.id));
    }
    await w.tx.update(instruments).set({ name }).where(eq(instruments.id, instrumentId));
    const keptFileId =
      before !== undefined && isSameCalibration(instrumentSpecSchema.parse(before.spec), spec)
        ? before.calibrationFileId
        : null;
    const calibrationFileId =
      certificateFile === undefined ? keptFileId : await keepCertificate(w, certificateFile);
    const [{ insertId: instrumentRevisionId }] = await w.tx
      .insert(instrumentRevisions)
      .values({ instrumentId, revision, spec, calibrationFileId, createdAt: w.now });
    await w.record({
      action: 'instrument.revise',
      subjects: [{ type: 'instrument', id: instrumentId }],
      details: { revision, from: before?.spec ?? null, to: spec, calibrationFileId },
    });
    return { instrumentId, instrumentRevisionId, number: row.number, revision };
  });
}

/** By its number and its day: a wrong figure put right does not make it another. */
function isSameCalibration(before: InstrumentSpec, after: InstrumentSpec): boolean {
  const [old, now] = [before.calibration, after.calibration];
  return (
    old !== null &&
    now !== null &&
    old.certificateNumber === now.certificateNumber &&
    old.calibratedOn === now.calibratedOn
  );
}
