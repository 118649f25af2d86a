import { and, desc, eq, gt, isNotNull, isNull } from 'drizzle-orm';
import {
  checkQuestion,
  checkValue,
  deviationOf,
  deviationText,
  isGood,
  runsInDoubt,
} from '~/domain/bench/daily-check';
import { parseEntry } from '~/domain/bench/entry';
import type { InstrumentSpec, PathSpec } from '~/domain/bench/types';
import type { DailyCheckEntry } from '~/schemas/bench-checks';
import { instrumentSpecSchema, pathSpecSchema } from '~/schemas/bench-specs';
import {
  checkReferences,
  dailyChecks,
  instrumentRevisions,
  pathRevisions,
  readings,
  runFlags,
  testRuns,
} from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { referenceOf } from '~/server/queries/bench/read-check-state';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';

type ReferenceRow = typeof checkReferences.$inferSelect;

/**
 * Writes down what a reference reads. One outside its band flags every run closed since it was last good that used
 * its instrument.
 *
 * @throws DomainError `not_found`; `conflict` where the reference is given up; `refused` with field `text` for a
 * value that makes no sense or has to be confirmed
 */
export async function recordDailyCheck(
  input: DailyCheckEntry,
  ctx: Ctx,
): Promise<{ dailyCheckId: number; number: string; isGood: boolean; deviation: string; flagged: number }> {
  return write(ctx, async (w) => {
    // Locked, so that two checks, or a check and the closing of a run, come one after the other.
    const [row] = await w.tx
      .select()
      .from(checkReferences)
      .where(eq(checkReferences.id, input.checkReferenceId))
      .for('update');
    if (row === undefined) throw new DomainError('not_found', 'There is no such reference.');
    if (row.retiredAt !== null) throw new DomainError('conflict', `${row.number} is given up.`);
    const reference = referenceOf(row, await listQuantities(w.tx));
    const { instrument, path } = await equipmentOf(w, row);
    const [before] = await w.tx
      .select({ enteredUnit: dailyChecks.enteredUnit })
      .from(dailyChecks)
      .where(eq(dailyChecks.checkReferenceId, row.id))
      .orderBy(desc(dailyChecks.at), desc(dailyChecks.id))
      .limit(1);
    const read = parseEntry(input.text, reference.quantity, {
      ...(before === undefined ? {} : { columnUnit: before.enteredUnit }),
      ...(instrument.spec.detector === null ? {} : { detector: instrument.spec.detector }),
      confirmed: input.confirmed,
    });
    if (!read.ok) throw new DomainError('refused', read.reason, { text: read.reason });
    const value = checkValue(reference, read.value, path?.spec ?? null);
    if (!value.ok) throw new DomainError('refused', value.reason, { text: value.reason });
    const deviation = deviationOf(reference, value.value);
    const question = input.confirmed ? null : checkQuestion(reference, deviation);
    if (question !== null) throw new DomainError('refused', question, { text: question });
    const good = isGood(reference, deviation);
    const [{ insertId: dailyCheckId }] = await w.tx.insert(dailyChecks).values({
      checkReferenceId: row.id,
      instrumentRevisionId: instrument.revisionId,
      pathRevisionId: path?.revisionId ?? null,
      enteredText: input.text,
      enteredUnit: read.enteredUnit,
      ...{ value: value.value, deviation, isGood: good },
      at: w.now,
      byUserId: actingUserId(w),
    });
    const flagged = good ? [] : await flagRuns(w, row, dailyCheckId);
    await w.record({
      action: 'check.record',
      subjects: [
        { type: 'check_reference', id: row.id },
        { type: 'instrument', id: row.instrumentId },
        ...flagged.map((id) => ({ type: 'run' as const, id })),
      ],
      details: { value: value.value, deviation, isGood: good, flagged: flagged.length },
    });
    return {
      ...{ dailyCheckId, number: row.number, isGood: good },
      ...{ deviation: deviationText(reference, deviation), flagged: flagged.length },
    };
  });
}

interface Used<S> {
  revisionId: number;
  spec: S;
}

async function equipmentOf(
  w: WriteContext,
  row: ReferenceRow,
): Promise<{ instrument: Used<InstrumentSpec>; path: Used<PathSpec> | null }> {
  const outOfUse = (what: string) =>
    new DomainError('conflict', `The ${what} that ${row.number} is measured with is out of use.`);
  const [instrument] = await w.tx
    .select({ revisionId: instrumentRevisions.id, spec: instrumentRevisions.spec })
    .from(instrumentRevisions)
    .where(
      and(eq(instrumentRevisions.instrumentId, row.instrumentId), isNull(instrumentRevisions.retiredAt)),
    );
  if (instrument === undefined) throw outOfUse('instrument');
  const used = { revisionId: instrument.revisionId, spec: instrumentSpecSchema.parse(instrument.spec) };
  if (row.pathId === null) return { instrument: used, path: null };
  const [path] = await w.tx
    .select({ revisionId: pathRevisions.id, spec: pathRevisions.spec })
    .from(pathRevisions)
    .where(and(eq(pathRevisions.pathId, row.pathId), isNull(pathRevisions.retiredAt)));
  if (path === undefined) throw outOfUse('path');
  return {
    instrument: used,
    path: { revisionId: path.revisionId, spec: pathSpecSchema.parse(path.spec) },
  };
}

/** Flags the runs that a bad check casts doubt on, and gives their ids. */
async function flagRuns(w: WriteContext, row: ReferenceRow, dailyCheckId: number): Promise<number[]> {
  const [lastGood] = await w.tx
    .select({ at: dailyChecks.at })
    .from(dailyChecks)
    .where(and(eq(dailyChecks.checkReferenceId, row.id), eq(dailyChecks.isGood, true)))
    .orderBy(desc(dailyChecks.at))
    .limit(1);
  const since = lastGood?.at ?? row.createdAt;
  const closed = await w.tx
    .selectDistinct({ id: testRuns.id, closedAt: testRuns.closedAt })
    .from(testRuns)
    .innerJoin(readings, eq(readings.testRunId, testRuns.id))
    .innerJoin(instrumentRevisions, eq(instrumentRevisions.id, readings.instrumentRevisionId))
    .where(
      and(
        eq(instrumentRevisions.instrumentId, row.instrumentId),
        isNull(readings.voidedAt),
        isNotNull(testRuns.closedAt),
        gt(testRuns.closedAt, since),
      ),
    );
  const flagged = await w.tx
    .select({ runId: runFlags.testRunId })
    .from(runFlags)
    .innerJoin(dailyChecks, eq(dailyChecks.id, runFlags.dailyCheckId))
    .where(and(eq(dailyChecks.checkReferenceId, row.id), gt(dailyChecks.at, since)));
  const runs = runsInDoubt(
    closed.flatMap(({ id, closedAt }) => (closedAt === null ? [] : [{ id, closedAt }])),
    {
      lastGoodAt: lastGood?.at ?? null,
      keptSince: row.createdAt,
      flagged: new Set(flagged.map(({ runId }) => runId)),
    },
  );
  if (runs.length === 0) return [];
  await w.tx
    .insert(runFlags)
    .values(runs.map(({ id }) => ({ testRunId: id, dailyCheckId, createdAt: w.now })));
  return runs.map(({ id }) => id);
}
