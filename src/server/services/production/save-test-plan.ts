import { eq } from 'drizzle-orm';
import { readPlanLine } from '~/domain/bench/plan-lines';
import type { PlanPoint } from '~/domain/bench/plan-lines';
import { keysOf, parseCondition } from '~/domain/planning/condition';
import type { PlanEdit } from '~/schemas/test-plans';
import { testPlanRevisions, testPoints } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { FieldErrors } from '~/server/errors';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { readTestPlan } from '~/server/queries/bench/read-test-plan';
import { listOptionGroups } from '~/server/queries/catalog/list-option-groups';
import { write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { lockModel } from './lock-model';

/**
 * Saves a draft as its editor sends it, whole. What the draft as such lacks is asked at its release; a row that cannot be
 * read is refused here, by row and field.
 *
 * @throws DomainError `not_found`; `conflict` where it is released, or somebody else has changed it meanwhile; `invalid`
 */
export async function saveTestPlan(
  input: PlanEdit & { model: string; letter: string },
  ctx: Ctx,
): Promise<{ letter: string; points: number; stamp: string }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const plan = await readTestPlan(w.tx, model.slug, input.letter);
    if (plan === null) {
      throw new DomainError('not_found', `There is no test plan ${input.letter} of ${model.name}.`);
    }
    const name = `Test plan ${plan.letter} of ${model.name}`;
    if (plan.state !== 'draft') {
      throw new DomainError('conflict', `${name} is ${plan.state} and does not change; draft the next one.`);
    }
    if (plan.stamp !== input.stamp) {
      throw new DomainError(
        'conflict',
        `Somebody else has changed ${name} meanwhile. What you typed is still here: compare, and save it again.`,
        { stamp: plan.stamp },
      );
    }
    const points = await readLines(w, model.id, input);
    const { note, supplyV, loadOhm, outputStage } = input;
    await w.tx
      .update(testPlanRevisions)
      .set({ note, supplyV, loadOhm, outputStage })
      .where(eq(testPlanRevisions.id, plan.id));
    await w.tx.delete(testPoints).where(eq(testPoints.testPlanRevisionId, plan.id));
    if (points.length > 0) {
      await w.tx.insert(testPoints).values(
        points.map(({ lower, upper, ...point }, index) => ({
          ...point,
          ...{ lowerLimit: lower, upperLimit: upper, testPlanRevisionId: plan.id, position: index + 1 },
        })),
      );
    }
    await w.record({
      action: 'test_plan.save',
      subjects: [{ type: 'test_plan_revision', id: plan.id }],
      details: { letter: plan.letter, points: { from: plan.points.length, to: points.length } },
    });
    const saved = await readTestPlan(w.tx, model.slug, plan.letter);
    return { letter: plan.letter, points: points.length, stamp: saved?.stamp ?? '' };
  });
}

async function readLines(w: WriteContext, modelId: number, { lines }: PlanEdit): Promise<PlanPoint[]> {
  const [quantities, groups] = [await listQuantities(w.tx), await listOptionGroups(w.tx, modelId)];
  const options = new Set(groups.flatMap((group) => group.options.map(({ key }) => key)));
  const faults: FieldErrors = {};
  const points: PlanPoint[] = [];
  for (const { row, line } of lines) {
    const read = readPlanLine(line, quantities);
    const found = read.ok ? {} : read.faults;
    const condition = parseCondition(line.condition);
    const strange = condition.ok ? [...keysOf(condition.ast)].find((key) => !options.has(key)) : undefined;
    if (strange !== undefined) found.condition = `The model has no option “${strange}”.`;
    for (const [field, sentence] of Object.entries(found)) faults[`lines.${row}.${field}`] = sentence;
    if (read.ok) points.push(read.point);
  }
  const [first] = Object.entries(faults);
  if (first !== undefined) {
    const row = Number(first[0].split('.')[1]) + 1;
    throw new DomainError('invalid', `Row ${row} cannot be used: ${first[1]}`, faults);
  }
  return points;
}
