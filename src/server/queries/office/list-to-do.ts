import { and, asc, eq, isNull, ne, sql } from 'drizzle-orm';
import type { StaffRole } from '~/domain/people/roles';
import { nextTask } from '~/domain/people/to-do';
import type { Task } from '~/domain/people/to-do';
import type { Reader } from '~/server/db/client';
import {
  batches,
  certificates,
  holds,
  models,
  orderLines,
  orders,
  outbox,
  providerEvents,
  reworks,
  testRuns,
  units,
} from '~/server/db/schema';

export interface ToDoRow extends Task {
  serial: string;
  modelName: string;
  batchNumber: number | null;
  /** The owner's date for the batch, `YYYY-MM-DD`. */
  estimatedOn: string | null;
}

/**
 * What waits for people of these roles, most urgent first: the earliest date, then what is furthest along.
 * `count` is of all that waits; `rows` are the first of them.
 */
export async function listToDo(
  reader: Reader,
  roles: readonly StaffRole[],
  limit: number,
): Promise<{ rows: ToDoRow[]; count: number }> {
  const newest = (column: typeof testRuns.runNo | typeof testRuns.state | typeof testRuns.result) =>
    sql<
      string | null
    >`(select ${column} from ${testRuns} where ${testRuns.unitId} = ${units.id} order by ${testRuns.runNo} desc limit 1)`;
  const rows = await reader
    .select({
      serial: units.serial,
      stage: units.stage,
      modelName: models.name,
      batchNumber: batches.number,
      estimatedOn: batches.estimatedOn,
      orderNumber: orders.number,
      onHold: sql<number>`exists (select 1 from ${holds} where ${holds.endedAt} is null and ((${holds.subjectType} = 'unit' and ${holds.subjectId} = ${units.id}) or (${holds.subjectType} = 'batch' and ${holds.subjectId} = ${units.batchId}) or (${holds.subjectType} = 'order' and ${holds.subjectId} = ${orders.id})))`,
      openRework: sql<number>`exists (select 1 from ${reworks} where ${reworks.unitId} = ${units.id} and ${reworks.closedAt} is null)`,
      runNo: newest(testRuns.runNo),
      runState: newest(testRuns.state),
      runResult: newest(testRuns.result),
      certified: sql<number>`exists (select 1 from ${certificates} where ${certificates.testRunId} = (select ${testRuns.id} from ${testRuns} where ${testRuns.unitId} = ${units.id} order by ${testRuns.runNo} desc limit 1))`,
    })
    .from(units)
    .innerJoin(models, eq(models.id, units.modelId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .where(ne(units.stage, 'gone'))
    .orderBy(
      sql`${batches.estimatedOn} is null`,
      asc(batches.estimatedOn),
      sql`field(${units.stage}, 'ship', 'pack', 'final_test', 'align', 'boards', 'kit')`,
      asc(units.serial),
    );
  const mine = rows.flatMap((row): ToDoRow[] => {
    const task = nextTask({
      ...row,
      onHold: row.onHold === 1,
      openRework: row.openRework === 1,
      openRunNo: row.runState === 'open' ? Number(row.runNo) : null,
      certified: row.certified === 1,
      newestResult: row.runState === 'closed' ? row.runResult : null,
    });
    if (task === null || !(roles.includes('owner') || roles.includes(task.role))) return [];
    const { serial, modelName, batchNumber, estimatedOn } = row;
    return [{ ...task, serial, modelName, batchNumber, estimatedOn }];
  });
  return { rows: mine.slice(0, limit), count: mine.length };
}

/** What only the owner settles: mail given up, events of the provider that wait, units on hold. */
export async function countOwnersMatters(reader: Reader) {
  const counted = sql<number>`count(*)`;
  const [gaveUp, keptEvents, openHolds] = await Promise.all([
    reader
      .select({ n: counted })
      .from(outbox)
      .where(and(isNull(outbox.doneAt), sql`${outbox.gaveUpAt} is not null`)),
    reader.select({ n: counted }).from(providerEvents).where(eq(providerEvents.state, 'kept')),
    reader.select({ n: counted }).from(holds).where(isNull(holds.endedAt)),
  ]);
  return { gaveUp: gaveUp[0]?.n ?? 0, keptEvents: keptEvents[0]?.n ?? 0, openHolds: openHolds[0]?.n ?? 0 };
}
