import { eq, sql } from 'drizzle-orm';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { COMPUTATION_VERSION, judgeRun, pointLabel } from '~/domain/bench/judge-run';
import type { RunResult } from '~/domain/bench/run-result';
import type { TestPoint } from '~/domain/bench/types';
import { nextStage } from '~/domain/production/stages';
import { invariant } from '~/lib/invariant';
import { runPoints, testPlanRevisions, testRuns, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import { advanceUnit } from '~/server/services/production/advance-unit';
import { confirmRemedies } from '~/server/services/production/confirm-remedies';
import { lockUnit } from '~/server/services/production/lock-unit';
import { openRework } from '~/server/services/production/open-rework';
import { write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { lockOwnRun } from './lock-run';
import { mustHaveGoodChecks } from './must-have-good-checks';

type ClosedResult = Exclude<RunResult['result'], 'incomplete'>;

/**
 * Closes a run with the result that the program computes from its readings, and keeps each point's verdict
 * with its limit, uncertainty and rule as they were. A passed unit goes on to packing, a failed one into
 * rework with the failing points as its cause; an undecided one stays at its final test.
 *
 * @throws DomainError `conflict` where something stands against closing it or it is closed already; `taken`,
 * `not_found`
 */
export async function closeRun(
  input: { runId: number },
  ctx: Ctx,
): Promise<{ runId: number; runNo: number; serial: string; result: ClosedResult }> {
  return write(ctx, async (w) => {
    // The unit is locked first, as opening a run does, so that the two cannot wait for each other.
    const unit = await lockUnit(w.tx, await serialOf(w, input.runId));
    const { row: run } = await lockOwnRun(w, input.runId);
    await mustHaveGoodChecks(w);
    const sheet = await readRunSheet(w.tx, run.id);
    const { judgements, result: computed } = judgeRun(sheet);
    const { result } = computed;
    const isReleased = result === 'passed' || result === 'passed_by_concession';
    if (!computed.canClose || result === 'incomplete') {
      throw new DomainError('conflict', `The run cannot close yet. ${computed.why.join(' ')}`);
    }
    if (isReleased && unit.openReworkId !== null) {
      throw new DomainError(
        'conflict',
        `${unit.row.serial} went into rework during this run: it cannot pass.`,
      );
    }
    const judged = sheet.points.map((point) => {
      const judgement = judgements.get(point.id);
      invariant(judgement !== undefined, 'every point is judged');
      const conceded = sheet.concessions.find(({ testPointId }) => testPointId === point.id);
      return { point, judgement, concession: conceded?.reason ?? null };
    });
    const plan = await planName(w, run.testPlanRevisionId);
    await w.tx.insert(runPoints).values(judged.map((each) => keptPoint(run.id, plan, each)));
    const stoppedEarly =
      result === 'failed' &&
      judged.some(({ point, judgement }) => point.required && judgement.verdict === 'not_run');
    await w.tx
      .update(testRuns)
      .set({
        state: 'closed',
        result,
        stoppedEarly,
        closedAt: w.now,
        computationVersion: COMPUTATION_VERSION,
        version: run.version + 1,
      })
      .where(eq(testRuns.id, run.id));
    await w.tx
      .update(units)
      .set({
        firmwareVersion: run.firmwareVersion,
        alignment: run.alignment,
        version: sql`${units.version} + 1`,
      })
      .where(eq(units.id, unit.row.id));
    if (isReleased && unit.row.stage === 'final_test') {
      await advanceUnit(w, unit.row, nextStage('final_test'));
    }
    if (isReleased) await confirmRemedies(w, { runId: run.id, unitId: unit.row.id });
    // One that had passed before is no longer released by its newest run.
    if (result === 'undecided') await advanceUnit(w, unit.row, 'final_test');
    if (result === 'failed' && unit.openReworkId === null) {
      await openRework({ serial: unit.row.serial, cause: causeOf(run.runNo, judged), testRunId: run.id }, w);
    }
    await w.record({
      action: 'run.close',
      subjects: [
        { type: 'run', id: run.id },
        { type: 'unit', id: unit.row.id },
      ],
      details: { runNo: run.runNo, result, stoppedEarly, why: computed.why },
    });
    return { runId: run.id, runNo: run.runNo, serial: unit.row.serial, result };
  });
}

async function serialOf(w: WriteContext, runId: number): Promise<string> {
  const [found] = await w.tx
    .select({ serial: units.serial })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .where(eq(testRuns.id, runId));
  if (found === undefined) throw new DomainError('not_found', 'There is no such run.');
  return found.serial;
}

async function planName(w: WriteContext, revisionId: number): Promise<string> {
  const [plan] = await w.tx
    .select({ letter: testPlanRevisions.letter })
    .from(testPlanRevisions)
    .where(eq(testPlanRevisions.id, revisionId));
  return `test plan, revision ${plan?.letter ?? '?'}`;
}

interface Judged {
  point: TestPoint;
  judgement: PointJudgement;
  concession: string | null;
}

function keptPoint(runId: number, plan: string, { point, judgement, concession }: Judged) {
  const isMissed = judgement.verdict === 'fail' || judgement.verdict === 'too_close';
  return {
    testRunId: runId,
    testPointId: point.id,
    verdict: judgement.verdict,
    value: judgement.value,
    expandedUncertainty: judgement.U,
    coverageFactor: judgement.k,
    readingCount: judgement.n,
    lowerLimit: judgement.lower,
    upperLimit: judgement.upper,
    ruleKey: judgement.ruleKey,
    ruleText: judgement.ruleText ?? `Fixed by the ${plan}`,
    probabilityOfConformance: judgement.pConform,
    concession: isMissed ? concession : null,
  };
}

const causeLength = 300;

/** `Run 1: 20 m, 2nd harmonic, 5.9 dB over the limit`, as a rework's cause. */
function causeOf(runNo: number, judged: readonly Judged[]): string {
  const failed = judged
    .filter(({ judgement, concession }) => judgement.verdict === 'fail' && concession === null)
    .map(({ point, judgement }) => `${pointLabel(point)}, ${judgement.marginText}`);
  const cause = `Run ${runNo}: ${failed.join('; ')}`;
  return cause.length <= causeLength ? cause : `${cause.slice(0, causeLength - 1)}…`;
}
