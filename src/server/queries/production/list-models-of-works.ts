import { asc, eq, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { bomRevisions, buildSheetRevisions, models, testPlanRevisions, units } from '~/server/db/schema';

export interface ModelRow {
  slug: string;
  name: string;
  serialPrefix: string;
  state: 'draft' | 'for_sale' | 'withdrawn';
  /** Letters of what is released now. */
  bom: string | null;
  buildSheet: string | null;
  testPlan: string | null;
  units: number;
}

/** The models of the works, with what is released of each. */
export async function listModelsOfWorks(reader: Reader): Promise<ModelRow[]> {
  const rows = await reader
    .select({
      slug: models.slug,
      name: models.name,
      serialPrefix: models.serialPrefix,
      state: models.state,
      bom: sql<
        string | null
      >`(select max(${bomRevisions.letter}) from ${bomRevisions} where ${bomRevisions.modelId} = ${models.id} and ${bomRevisions.state} = 'released')`,
      buildSheet: sql<
        string | null
      >`(select max(${buildSheetRevisions.letter}) from ${buildSheetRevisions} where ${buildSheetRevisions.modelId} = ${models.id} and ${buildSheetRevisions.state} = 'released')`,
      testPlan: sql<
        string | null
      >`(select max(${testPlanRevisions.letter}) from ${testPlanRevisions} where ${testPlanRevisions.modelId} = ${models.id} and ${testPlanRevisions.state} = 'released')`,
      units: sql<string>`count(${units.id})`,
    })
    .from(models)
    .leftJoin(units, eq(units.modelId, models.id))
    .groupBy(models.id)
    .orderBy(asc(models.name));
  return rows.map((row) => ({ ...row, units: Number(row.units) }));
}
