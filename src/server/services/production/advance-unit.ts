import { eq, sql } from 'drizzle-orm';
import type { UnitStage } from '~/domain/production/stages';
import { units } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';

/** Sets the stage of a locked unit, if it is another one. */
export async function advanceUnit(
  w: WriteContext,
  unit: { id: number; stage: UnitStage },
  stage: UnitStage,
): Promise<void> {
  if (stage === unit.stage) return;
  await w.tx
    .update(units)
    .set({ stage, version: sql`${units.version} + 1` })
    .where(eq(units.id, unit.id));
}
