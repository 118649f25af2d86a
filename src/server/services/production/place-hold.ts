import { eq } from 'drizzle-orm';
import { normaliseScan } from '~/lib/serials';
import type { Tx } from '~/server/db/client';
import { batches, holds, lots, orders, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';

/** What a hold stands on, by the number that people know. */
export type HoldSubject =
  | { type: 'unit'; number: string }
  | { type: 'lot'; number: string }
  | { type: 'batch'; number: number }
  | { type: 'order'; number: number };

/**
 * Stops a unit, lot, batch or order, with a reason; who places it owns it.
 *
 * @throws DomainError `not_found`
 */
export async function placeHold(
  input: { subject: HoldSubject; reason: string },
  ctx: Ctx,
): Promise<{ holdId: number }> {
  return write(ctx, async (w) => {
    const { subject, reason } = input;
    const subjectId = await lockSubject(w.tx, subject);
    if (subjectId === undefined) {
      throw new DomainError('not_found', `There is no ${subject.type} ${subject.number}.`);
    }
    const [hold] = await w.tx.insert(holds).values({
      subjectType: subject.type,
      subjectId,
      reason,
      ownerUserId: actingPerson(w),
      placedAt: w.now,
    });
    await w.record({
      action: 'hold.place',
      subjects: [{ type: subject.type, id: subjectId }],
      details: { holdId: hold.insertId, reason },
    });
    return { holdId: hold.insertId };
  });
}

/** The row's lock makes a hold and a dispatch at the same moment come one after the other. */
async function lockSubject(tx: Tx, subject: HoldSubject): Promise<number | undefined> {
  switch (subject.type) {
    case 'unit':
      return first(
        await tx
          .select({ id: units.id })
          .from(units)
          .where(eq(units.serial, normaliseScan(subject.number)))
          .for('update'),
      );
    case 'lot':
      return first(
        await tx
          .select({ id: lots.id })
          .from(lots)
          .where(eq(lots.number, normaliseScan(subject.number)))
          .for('update'),
      );
    case 'batch':
      return first(
        await tx
          .select({ id: batches.id })
          .from(batches)
          .where(eq(batches.number, subject.number))
          .for('update'),
      );
    case 'order':
      return first(
        await tx
          .select({ id: orders.id })
          .from(orders)
          .where(eq(orders.number, subject.number))
          .for('update'),
      );
  }
}

function first(rows: readonly { id: number }[]): number | undefined {
  return rows[0]?.id;
}
