import { and, eq, isNull, or } from 'drizzle-orm';
import type { UnitAnswer, UnitFacts } from '~/domain/production/unit-status';
import { normaliseScan } from '~/lib/serials';
import type { Tx } from '~/server/db/client';
import { holds, orderLines, reworks, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';

/** A unit under its row lock, with what stands against working on it. */
export interface LockedUnit {
  row: typeof units.$inferSelect;
  facts: UnitFacts;
  openReworkId: number | null;
}

/**
 * Locks a unit by its serial number as scanned or typed.
 *
 * @throws DomainError `not_found`
 */
export async function lockUnit(tx: Tx, serial: string): Promise<LockedUnit> {
  const [row] = await tx
    .select()
    .from(units)
    .where(eq(units.serial, normaliseScan(serial)))
    .for('update');
  if (row === undefined) throw new DomainError('not_found', `There is no unit ${serial}.`);
  const [rework] = await tx
    .select({ id: reworks.id })
    .from(reworks)
    .where(and(eq(reworks.unitId, row.id), isNull(reworks.closedAt)));
  const openReworkId = rework?.id ?? null;
  const facts = { stage: row.stage, holds: await countHolds(tx, row), openRework: openReworkId !== null };
  return { row, facts, openReworkId };
}

/**
 * Refuses with everything that stands against it.
 *
 * @throws DomainError `conflict`
 */
export function mustBeAllowed(serial: string, answer: UnitAnswer): void {
  if (!answer.ok) throw new DomainError('conflict', `${serial}: ${answer.reasons.join(' ')}`);
}

async function countHolds(tx: Tx, unit: typeof units.$inferSelect): Promise<number> {
  const [line] =
    unit.orderLineId === null
      ? []
      : await tx
          .select({ orderId: orderLines.orderId })
          .from(orderLines)
          .where(eq(orderLines.id, unit.orderLineId));
  const on = (type: 'unit' | 'batch' | 'order', id: number | null | undefined) =>
    id === null || id === undefined ? undefined : and(eq(holds.subjectType, type), eq(holds.subjectId, id));
  const subject = or(on('unit', unit.id), on('batch', unit.batchId), on('order', line?.orderId));
  const found = await tx
    .select({ id: holds.id })
    .from(holds)
    .where(and(isNull(holds.endedAt), subject));
  return found.length;
}
