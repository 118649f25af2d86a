import { and, asc, eq, ne } from 'drizzle-orm';
import { planFaults } from '~/domain/bench/check-plan';
import { checkBom } from '~/domain/planning/resolve-bom';
import { checkBuildSheet, checkTestPlan } from '~/domain/production/check-revision';
import { invariant } from '~/lib/invariant';
import { outputStageSchema } from '~/schemas/bench-specs';
import type { RevisionKind } from '~/schemas/production-models';
import type { Tx } from '~/server/db/client';
import { bomRevisions, buildSheetRevisions, buildSteps, testPlanRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { listTestPoints } from '~/server/queries/bench/read-run-sheet';
import { listRegionsOfModel } from '~/server/queries/bench/read-test-plan';
import { listOptionGroups } from '~/server/queries/catalog/list-option-groups';
import type { ShopOptionGroup } from '~/server/queries/catalog/list-option-groups';
import { readBomLines } from '~/server/queries/production/read-bom';
import { actingUserId, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockModel } from './lock-model';

interface Ask {
  model: string;
  letter: string;
}

interface Released {
  revisionId: number;
  letter: string;
}

type Table = typeof bomRevisions | typeof buildSheetRevisions | typeof testPlanRevisions;

/**
 * Releases a draft BOM of a model: from here on it does not change. It is checked for every allowed
 * combination of options. The revision released before is retired; batches keep theirs.
 *
 * @throws DomainError `not_found`, `conflict` where it is no draft, `refused` with every fault found
 */
export async function releaseBomRevision(input: Ask, ctx: Ctx): Promise<Released> {
  return release('bom', bomRevisions, input, ctx, async (tx, revisionId, groups) => {
    const lines = await readBomLines(tx, revisionId);
    if (lines.length === 0) return ['The BOM has no line.'];
    const checked = checkBom(lines, groups);
    return checked.ok ? [] : checked.reasons;
  });
}

/** As {@link releaseBomRevision}, for a build sheet. */
export async function releaseBuildSheetRevision(input: Ask, ctx: Ctx): Promise<Released> {
  return release('build_sheet', buildSheetRevisions, input, ctx, async (tx, revisionId, groups) => {
    const steps = await tx
      .select({ position: buildSteps.position, title: buildSteps.title, condition: buildSteps.condition })
      .from(buildSteps)
      .where(eq(buildSteps.buildSheetRevisionId, revisionId))
      .orderBy(asc(buildSteps.position));
    const checked = checkBuildSheet(steps, groups);
    return checked.ok ? [] : checked.reasons;
  });
}

/** As {@link releaseBomRevision}, for a test plan. */
export async function releaseTestPlanRevision(input: Ask, ctx: Ctx): Promise<Released> {
  return release('test_plan', testPlanRevisions, input, ctx, async (tx, revisionId, groups) => {
    const [revision] = await tx
      .select({ modelId: testPlanRevisions.modelId, outputStage: testPlanRevisions.outputStage })
      .from(testPlanRevisions)
      .where(eq(testPlanRevisions.id, revisionId));
    invariant(revision !== undefined, 'the revision is there');
    const [quantities, read, regions] = [
      await listQuantities(tx),
      await listTestPoints(tx, revisionId),
      await listRegionsOfModel(tx, revision.modelId),
    ];
    const points = read.map(({ quantity, ...point }) => ({ ...point, quantityKey: quantity.key }));
    const checked = checkTestPlan(points, groups, quantities);
    if (!checked.ok) return checked.reasons;
    const outputStage = revision.outputStage === null ? null : outputStageSchema.parse(revision.outputStage);
    return planFaults({ points, outputStage }, quantities, regions, groups);
  });
}

async function release(
  kind: RevisionKind,
  table: Table,
  input: Ask,
  ctx: Ctx,
  faultsOf: (tx: Tx, revisionId: number, groups: ShopOptionGroup[]) => Promise<string[]>,
): Promise<Released> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const [revision] = await w.tx
      .select({ id: table.id, state: table.state })
      .from(table)
      .where(and(eq(table.modelId, model.id), eq(table.letter, input.letter)))
      .for('update');
    const name = `${words[kind]} ${input.letter} of ${model.name}`;
    if (revision === undefined) throw new DomainError('not_found', `There is no ${name}.`);
    if (revision.state !== 'draft')
      throw new DomainError('conflict', `${name} is ${revision.state} already.`);
    const faults = await faultsOf(w.tx, revision.id, await listOptionGroups(w.tx, model.id));
    if (faults.length > 0) throw new DomainError('refused', tooFaulty(name, faults));
    await w.tx
      .update(table)
      .set({ state: 'retired' })
      .where(and(eq(table.modelId, model.id), eq(table.state, 'released'), ne(table.id, revision.id)));
    await w.tx
      .update(table)
      .set({ state: 'released', releasedAt: w.now, releasedBy: actingUserId(w) })
      .where(eq(table.id, revision.id));
    await w.record({
      action: `${kind}.release`,
      subjects: [
        { type: 'model', id: model.id },
        { type: `${kind}_revision`, id: revision.id },
      ],
      details: { letter: input.letter, from: 'draft', to: 'released' },
    });
    return { revisionId: revision.id, letter: input.letter };
  });
}

const words: Record<RevisionKind, string> = {
  bom: 'BOM',
  build_sheet: 'build sheet',
  test_plan: 'test plan',
};

function tooFaulty(name: string, faults: readonly string[]): string {
  const some = faults.slice(0, 8);
  const more = faults.length > some.length ? ` And ${faults.length - some.length} more.` : '';
  return `${name} cannot be released. ${some.join(' ')}${more}`;
}
