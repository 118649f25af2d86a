import {
  buildSheetRevisions,
  buildSteps,
  partAlternates,
  parts,
  testPlanRevisions,
  units,
} from '~/server/db/schema';
import type { Db } from '~/server/db/client';
import { createBomRevision } from '~/server/services/production/create-bom-revision';
import { releaseBomRevision, releaseBuildSheetRevision } from '~/server/services/production/release-revision';
import type { CallContext } from '~/server/write';
import { eq } from 'drizzle-orm';
import { at, seedBatch, seedModel } from './catalog';
import type { SeededModel } from './catalog';
import { seedLot } from './stores';

export interface SeededFloor {
  model: SeededModel;
  batch: { batchId: number; number: number };
  /** Lot numbers. */
  lots: { transistors: string; alternates: string; crystals: string; resistors: string };
}

/**
 * A model whose units have two output transistors (an alternate is approved), four crystals with the narrow
 * filter, ten resistors issued by batch with 2.5 % of scrap, and a build sheet with a step in each stage.
 */
export async function seedFloor(ctx: CallContext): Promise<SeededFloor> {
  const seeded = await seedModel(ctx.db);
  const lots = {
    transistors: await seedLot(
      ctx,
      { number: 'Q-RD16', trace: 'each', footprint: '', value: 'RD16' },
      { quantity: 5, bin: 'B-2' },
    ),
    alternates: await seedLot(
      ctx,
      { number: 'Q-RD15', trace: 'each', footprint: '', value: 'RD15' },
      { quantity: 5 },
    ),
    crystals: await seedLot(
      ctx,
      { number: 'X-4915', trace: 'each', footprint: '', value: '4.9152MHz' },
      { quantity: 40, bin: 'A-1' },
    ),
    resistors: await seedLot(ctx, { number: 'R-0805-4K7' }, { quantity: 200 }),
  };
  await ctx.db.insert(partAlternates).values({
    partId: await partId(ctx.db, 'Q-RD16'),
    alternatePartId: await partId(ctx.db, 'Q-RD15'),
    modelId: seeded.modelId,
    rank: 1,
  });
  const bom = await createBomRevision(
    {
      model: seeded.slug,
      note: 'for the tests',
      lines: [
        { partNumber: 'Q-RD16', quantity: 2, designators: ['Q5', 'Q6'] },
        {
          partNumber: 'X-4915',
          quantity: 4,
          designators: ['X1', 'X2', 'X3', 'X4'],
          condition: 'filter.narrow',
        },
        {
          partNumber: 'R-0805-4K7',
          quantity: 10,
          designators: Array.from({ length: 10 }, (_, index) => `R${index + 1}`),
          scrapPercent: 2.5,
        },
      ],
    },
    ctx,
  );
  await releaseBomRevision({ model: seeded.slug, letter: bom.letter }, ctx);
  const model = {
    ...seeded,
    bomRevisionId: bom.bomRevisionId,
    buildSheetRevisionId: await seedBuildSheet(ctx, seeded),
    testPlanRevisionId: await testPlanOf(ctx.db, seeded.modelId),
  };
  return { model, batch: await seedBatch(ctx.db, model, { number: 12 }), lots };
}

/** Steps: kit 1, boards 2 (one only with the narrow filter), align 1 with an entry of 55 to 65 mA. */
async function seedBuildSheet(ctx: CallContext, { modelId, slug }: SeededModel): Promise<number> {
  const [{ insertId: buildSheetRevisionId }] = await ctx.db
    .insert(buildSheetRevisions)
    .values({ modelId, letter: 'B', state: 'draft', createdAt: at });
  const step = { buildSheetRevisionId, instruction: 'As drawn.' };
  await ctx.db.insert(buildSteps).values([
    { ...step, position: 1, stage: 'kit', title: 'Check the kit against the sheet' },
    { ...step, position: 2, stage: 'boards', title: 'Fit the coils', minutes: 40 },
    { ...step, position: 3, stage: 'boards', title: 'Fit the crystals', condition: 'filter.narrow' },
    {
      ...step,
      position: 4,
      stage: 'align',
      title: 'Set the quiescent current',
      caution: 'The heat sink is hot after a minute of key-down.',
      entry: { label: 'the quiescent current', unit: 'mA', lower: 55, upper: 65 },
    },
  ]);
  await releaseBuildSheetRevision({ model: slug, letter: 'B' }, ctx);
  return buildSheetRevisionId;
}

/** A unit at its kit, with the narrow filter unless it is left out. */
export async function seedUnit(
  db: Db,
  floor: Pick<SeededFloor, 'model' | 'batch'>,
  serial: string,
  changes: Partial<typeof units.$inferInsert> = {},
): Promise<number> {
  const { modelId, bomRevisionId, buildSheetRevisionId, testPlanRevisionId } = floor.model;
  const [{ insertId }] = await db.insert(units).values({
    ...{ serial, modelId, bomRevisionId, buildSheetRevisionId, testPlanRevisionId },
    batchId: floor.batch.batchId,
    options: ['band.40m', 'band.30m', 'band.20m', 'filter.narrow'],
    stage: 'kit',
    alignment: {},
    pageCode: serial.replace('-', ''),
    createdAt: at,
    ...changes,
  });
  return insertId;
}

async function partId(db: Db, number: string): Promise<number> {
  const [row] = await db.select({ id: parts.id }).from(parts).where(eq(parts.number, number));
  if (row === undefined) throw new Error(`There is no part ${number}.`);
  return row.id;
}

async function testPlanOf(db: Db, modelId: number): Promise<number> {
  const [row] = await db
    .select({ id: testPlanRevisions.id })
    .from(testPlanRevisions)
    .where(eq(testPlanRevisions.modelId, modelId));
  if (row === undefined) throw new Error('The model has no test plan.');
  return row.id;
}
