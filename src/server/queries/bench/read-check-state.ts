import { and, asc, eq, inArray, isNull, sql } from 'drizzle-orm';
import { checkState, deviationText } from '~/domain/bench/daily-check';
import type { CheckedReference, CheckState, Reference } from '~/domain/bench/daily-check';
import { unknownQuantity } from '~/domain/bench/quantities';
import type { QuantityBook } from '~/domain/bench/quantities';
import { dayOf } from '~/lib/dates';
import type { Reader } from '~/server/db/client';
import { checkReferences, dailyChecks, instruments, paths } from '~/server/db/schema';
import { getWorks } from '~/server/queries/office/get-works';
import { listQuantities } from './list-quantities';

export interface ReferenceInUse extends CheckedReference, Reference {
  id: number;
  instrumentNumber: string;
  pathNumber: string | null;
}

/** A reference as its rules see it. */
export function referenceOf(
  row: Pick<typeof checkReferences.$inferSelect, 'quantityKey' | 'freqHz' | 'nominal' | 'tolerance'>,
  book: QuantityBook,
): Reference {
  const { quantityKey, freqHz, nominal, tolerance } = row;
  return { quantity: book.get(quantityKey) ?? unknownQuantity(quantityKey), freqHz, nominal, tolerance };
}

/** The references in use, each with its newest check. */
export async function listReferences(reader: Reader): Promise<ReferenceInUse[]> {
  const rows = await reader
    .select({
      reference: checkReferences,
      instrumentNumber: instruments.number,
      pathNumber: paths.number,
    })
    .from(checkReferences)
    .innerJoin(instruments, eq(instruments.id, checkReferences.instrumentId))
    .leftJoin(paths, eq(paths.id, checkReferences.pathId))
    .where(isNull(checkReferences.retiredAt))
    .orderBy(asc(checkReferences.number));
  if (rows.length === 0) return [];
  const ids = rows.map(({ reference }) => reference.id);
  const [checks, book, { timeZone }] = await Promise.all([
    reader
      .select()
      .from(dailyChecks)
      .where(
        and(
          inArray(dailyChecks.checkReferenceId, ids),
          eq(
            dailyChecks.id,
            sql`(select newest.id from daily_checks newest where newest.check_reference_id = ${dailyChecks.checkReferenceId} order by newest.at desc, newest.id desc limit 1)`,
          ),
        ),
      ),
    listQuantities(reader),
    getWorks(reader),
  ]);
  return rows.map(({ reference, instrumentNumber, pathNumber }) => {
    const { id, number, name } = reference;
    const rules = referenceOf(reference, book);
    const newest = checks.find(({ checkReferenceId }) => checkReferenceId === id);
    return {
      ...{ id, number, name, instrumentNumber, pathNumber },
      ...rules,
      newest:
        newest === undefined
          ? null
          : {
              id: newest.id,
              day: dayOf(newest.at, timeZone),
              isGood: newest.isGood,
              explained: newest.explainedAt !== null,
              deviation: deviationText(rules, newest.deviation),
            },
    };
  });
}

/** What the daily checks say at a moment: what is missing on its day, and what stands against closing a run. */
export async function readCheckState(reader: Reader, at: Date): Promise<CheckState<ReferenceInUse>> {
  const references = await listReferences(reader);
  if (references.length === 0) return { missingToday: [], bad: [] };
  const { timeZone } = await getWorks(reader);
  return checkState(references, dayOf(at, timeZone));
}
