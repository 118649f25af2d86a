import { and, desc, eq } from 'drizzle-orm';
import type { Tx } from '~/server/db/client';
import { batches, bomRevisions, buildSheetRevisions, testPlanRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { lockModel } from '~/server/services/production/lock-model';
import type { Ctx } from '~/server/write';
import { nextNumber, write } from '~/server/write';

export interface BatchOpening {
  modelSlug: string;
  places: number;
  priceMinor: number;
  /** None where the whole price is due at once. */
  depositMinor?: number | null | undefined;
  currency: string;
  /** The owner's date, `YYYY-MM-DD`. */
  estimatedOn?: string | null | undefined;
}

/**
 * Opens a batch of a model for orders, and freezes for it the BOM, the build sheet and the test plan that are
 * released now.
 *
 * @throws DomainError `not_found`, or `refused` where one of the three has no released revision
 */
export async function openBatch(input: BatchOpening, ctx: Ctx): Promise<{ batchId: number; number: number }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.modelSlug);
    const revisions = await releasedRevisions(w.tx, model.id, model.name);
    const number = await nextNumber(w.tx, 'batch');
    const [{ insertId: batchId }] = await w.tx.insert(batches).values({
      number,
      modelId: model.id,
      ...revisions,
      state: 'open',
      places: input.places,
      priceMinor: input.priceMinor,
      depositMinor: input.depositMinor ?? null,
      currency: input.currency,
      estimatedOn: input.estimatedOn ?? null,
      createdAt: w.now,
    });
    await w.record({
      action: 'batch.open',
      subjects: [
        { type: 'batch', id: batchId },
        { type: 'model', id: model.id },
        { type: 'bom_revision', id: revisions.bomRevisionId },
        { type: 'build_sheet_revision', id: revisions.buildSheetRevisionId },
        { type: 'test_plan_revision', id: revisions.testPlanRevisionId },
      ],
      details: {
        number,
        places: input.places,
        priceMinor: input.priceMinor,
        currency: input.currency,
        estimatedOn: input.estimatedOn ?? null,
      },
    });
    return { batchId, number };
  });
}

async function releasedRevisions(tx: Tx, modelId: number, modelName: string) {
  const newest = async (
    table: typeof bomRevisions | typeof buildSheetRevisions | typeof testPlanRevisions,
  ) => {
    const [row] = await tx
      .select({ id: table.id })
      .from(table)
      .where(and(eq(table.modelId, modelId), eq(table.state, 'released')))
      .orderBy(desc(table.id))
      .limit(1)
      .for('update');
    return row?.id;
  };
  const bomRevisionId = await newest(bomRevisions);
  const buildSheetRevisionId = await newest(buildSheetRevisions);
  const testPlanRevisionId = await newest(testPlanRevisions);
  if (bomRevisionId !== undefined && buildSheetRevisionId !== undefined && testPlanRevisionId !== undefined) {
    return { bomRevisionId, buildSheetRevisionId, testPlanRevisionId };
  }
  const missing = [
    ...(bomRevisionId === undefined ? ['BOM'] : []),
    ...(buildSheetRevisionId === undefined ? ['build sheet'] : []),
    ...(testPlanRevisionId === undefined ? ['test plan'] : []),
  ];
  const sentence = `${modelName} has no released ${missing.join(', no released ')}. Release it first; a batch is built to it.`;
  throw new DomainError('refused', sentence, { modelSlug: sentence });
}
