import { asc, eq, sql } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { instruments, models, testPlanRevisions, units } from '~/server/db/schema';
import { listOptionGroups } from '~/server/queries/catalog/list-option-groups';
import type { ShopOptionGroup } from '~/server/queries/catalog/list-option-groups';

/** A model to whose test plan a unit can be tested now. */
export interface TestableModel {
  slug: string;
  name: string;
  serialPrefix: string;
  planLetter: string;
  groups: ShopOptionGroup[];
}

/** Models with a released test plan, by name, with what has to be said of a unit of theirs. */
export async function listTestableModels(reader: Reader): Promise<TestableModel[]> {
  const rows = await reader
    .select({
      id: models.id,
      slug: models.slug,
      name: models.name,
      serialPrefix: models.serialPrefix,
      planLetter: testPlanRevisions.letter,
    })
    .from(models)
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.modelId, models.id))
    .where(eq(testPlanRevisions.state, 'released'))
    .orderBy(asc(models.name));
  return Promise.all(
    rows.map(async ({ id, ...row }) => ({ ...row, groups: await listOptionGroups(reader, id) })),
  );
}

/** How far a works has come on the way to its first certificate. */
export interface Beginning {
  hasModel: boolean;
  hasInstrument: boolean;
  hasUnit: boolean;
}

/** Whether there is anything yet of what a final test needs. */
export async function readBeginning(reader: Reader): Promise<Beginning> {
  const any = (table: typeof units | typeof instruments) =>
    reader
      .select({ one: sql<number>`1` })
      .from(table)
      .limit(1);
  const released = reader
    .select({ one: sql<number>`1` })
    .from(testPlanRevisions)
    .where(eq(testPlanRevisions.state, 'released'))
    .limit(1);
  const [model, instrument, unit] = await Promise.all([released, any(instruments), any(units)]);
  return { hasModel: model.length > 0, hasInstrument: instrument.length > 0, hasUnit: unit.length > 0 };
}
