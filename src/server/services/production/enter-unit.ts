import { randomBytes } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { CODE_RANDOM_BYTES, codeFromRandom } from '~/domain/certificates/code';
import { checkConfiguration } from '~/domain/planning/configuration';
import type { NewUnit } from '~/schemas/bench-alone';
import { testPlanRevisions, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listOptionGroups } from '~/server/queries/catalog/list-option-groups';
import { openRun } from '~/server/services/bench/open-run';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockModel } from './lock-model';

const duplicate = 1062;

/**
 * Enters a unit by the serial number that stands on it, without batch, order, BOM or build sheet, and opens its first
 * final test to the test plan that is released for its model.
 *
 * @throws DomainError `not_found` for the model; `conflict` where the serial number is taken, no test plan is released,
 * or a run cannot be opened; `invalid` where the options do not go together
 */
export async function enterUnit(
  input: NewUnit,
  ctx: Ctx,
): Promise<{ unitId: number; serial: string; runId: number; runNo: number }> {
  const { serial, option, destination } = input;
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const chosen = new Set(option);
    const checked = checkConfiguration(await listOptionGroups(w.tx, model.id), chosen);
    if (!checked.ok) {
      const sentence = checked.problems.map(({ reason }) => reason).join(' ');
      throw new DomainError('invalid', sentence, { option: sentence });
    }
    const [plan] = await w.tx
      .select({ id: testPlanRevisions.id, letter: testPlanRevisions.letter })
      .from(testPlanRevisions)
      .where(and(eq(testPlanRevisions.modelId, model.id), eq(testPlanRevisions.state, 'released')));
    if (plan === undefined) {
      const sentence = `No test plan of ${model.name} is released: release one first.`;
      throw new DomainError('conflict', sentence, { model: sentence });
    }
    const [{ insertId: unitId }] = await w.tx
      .insert(units)
      .values({
        ...{ serial, modelId: model.id, options: [...chosen], stage: 'final_test', alignment: {} },
        testPlanRevisionId: plan.id,
        pageCode: codeFromRandom(randomBytes(CODE_RANDOM_BYTES)),
        createdAt: w.now,
      })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        const sentence = `${serial} is in the books already; scan it to go on with it.`;
        throw new DomainError('conflict', sentence, { serial: sentence });
      });
    const { runId, runNo } = await openRun({ serial, destination }, w);
    await w.record({
      action: 'unit.enter',
      subjects: [
        { type: 'unit', id: unitId },
        { type: 'model', id: model.id },
      ],
      details: { serial, testPlan: plan.letter },
    });
    return { unitId, serial, runId, runNo };
  });
}
