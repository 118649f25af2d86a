import { eq } from 'drizzle-orm';
import { newestReading } from '~/domain/bench/run-entry';
import type { TestPoint } from '~/domain/bench/types';
import { readings } from '~/server/db/schema';
import type { StoredReading } from '~/server/queries/bench/read-run-sheet';
import { actingUserId } from '~/server/write';
import type { WriteContext } from '~/server/write';
import type { Equipment } from './equipment-in-use';

/** A reading that was understood, at the meter. */
export interface ReadReading extends Equipment {
  enteredText: string;
  enteredUnit: string;
  value: number;
  freqHz: number | null;
  atMost: boolean;
  attenuationHeld: boolean;
  source: 'typed' | 'sweep' | 'wire';
  sweepId: number | null;
}

/** Where a reading goes. */
interface Place {
  again: boolean;
  /** The one that is corrected, where it is not the newest. */
  corrects?: StoredReading | null;
  /** Number of the last one of this point that was added since `before` was read. */
  after?: number | undefined;
}

/** One reading as the ledger of changes shows it. */
export interface PutReading {
  readingId: number;
  readingNo: number;
  version: number;
  /** What stood there before, where a reading was corrected. */
  from: { text: string; unit: string; value: number } | null;
}

/**
 * Writes a reading of a point of a locked run: corrects the newest one or the one given, or adds the next.
 *
 * @param before the run's readings
 */
export async function putReading(
  w: WriteContext,
  run: { id: number },
  point: TestPoint,
  before: readonly StoredReading[],
  { again, corrects, after = 0, ...read }: ReadReading & Place,
): Promise<PutReading> {
  const corrected = again ? undefined : (corrects ?? newestReading(before, point.id));
  const who = { at: w.now, byUserId: actingUserId(w) };
  if (corrected !== undefined) {
    const version = corrected.version + 1;
    await w.tx
      .update(readings)
      .set({ ...read, ...who, version })
      .where(eq(readings.id, corrected.id));
    const { enteredText: text, enteredUnit: unit, value } = corrected;
    return {
      readingId: corrected.id,
      readingNo: corrected.readingNo,
      version,
      from: { text, unit, value },
    };
  }
  const readingNo =
    1 + Math.max(after, ...before.filter((one) => one.testPointId === point.id).map((one) => one.readingNo));
  const [{ insertId: readingId }] = await w.tx.insert(readings).values({
    testRunId: run.id,
    testPointId: point.id,
    readingNo,
    quantityKey: point.quantity.key,
    band: point.band,
    ...read,
    ...who,
  });
  return { readingId, readingNo, version: 1, from: null };
}
