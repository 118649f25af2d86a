import { asc, eq, ne, sql } from 'drizzle-orm';
import type { UnitStage } from '~/domain/production/stages';
import type { Reader } from '~/server/db/client';
import { batches, holds, models, orderLines, orders, reworks, units } from '~/server/db/schema';

export interface FloorUnit {
  serial: string;
  model: string;
  stage: UnitStage;
  batchNumber: number | null;
  /** The day it was promised for, or the owner's date for its batch. */
  dueOn: string | null;
  onHold: boolean;
  inRework: boolean;
}

/** Every unit that is in the works, the one that is due first on top. */
export async function listFloor(reader: Reader): Promise<FloorUnit[]> {
  const dueOn = sql<string | null>`coalesce(${orders.promisedOn}, ${batches.estimatedOn})`;
  const rows = await reader
    .select({
      serial: units.serial,
      model: models.name,
      stage: units.stage,
      batchNumber: batches.number,
      dueOn,
      onHold: sql<number>`exists (select 1 from ${holds} where ${holds.endedAt} is null and ((${holds.subjectType} = 'unit' and ${holds.subjectId} = ${units.id}) or (${holds.subjectType} = 'batch' and ${holds.subjectId} = ${units.batchId}) or (${holds.subjectType} = 'order' and ${holds.subjectId} = ${orders.id})))`,
      inRework: sql<number>`exists (select 1 from ${reworks} where ${reworks.unitId} = ${units.id} and ${reworks.closedAt} is null)`,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .where(ne(units.stage, 'gone'))
    .orderBy(sql`${dueOn} is null`, dueOn, asc(units.serial));
  return rows.map((row) => ({ ...row, onHold: row.onHold === 1, inRework: row.inRework === 1 }));
}
