import { and, eq, inArray } from 'drizzle-orm';
import { normaliseScan } from '~/lib/serials';
import type { Tx } from '~/server/db/client';
import { orderLines, orders, shipments, shipmentUnits, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { UnitGate } from '~/server/queries/dispatch/read-gate-facts';
import { advanceUnit } from '~/server/services/production/advance-unit';
import type { Ctx } from '~/server/write';
import { actingUserId, nextNumber, write } from '~/server/write';
import { lockOrderForDispatch, mustMayLeave } from './lock-order';

/**
 * Packs units of an order into a parcel, each by its scanned serial number, with the certificate that lies
 * beside it. Every unit must be one that may leave.
 *
 * @throws DomainError `not_found`, `invalid` where something was scanned that does not belong, `conflict`
 * with all that stands against it
 */
export async function packOrder(
  input: { orderNumber: number; serials: readonly string[]; weightG?: number | null | undefined },
  ctx: Ctx,
): Promise<{ shipmentId: number; shipmentNumber: number }> {
  return write(ctx, async (w) => {
    const { order, gates } = await lockOrderForDispatch(w.tx, { number: input.orderNumber });
    const scanned = [...new Set(input.serials.map(normaliseScan))];
    const parcel = await unitsScanned(w.tx, scanned, gates);
    await refusePacked(w.tx, parcel);
    mustMayLeave(parcel);
    const number = await nextNumber(w.tx, 'shipment');
    const [{ insertId: shipmentId }] = await w.tx.insert(shipments).values({
      number,
      orderId: order.id,
      state: 'packed',
      weightG: input.weightG ?? null,
      packedAt: w.now,
      packedBy: actingUserId(w),
    });
    await w.tx.insert(shipmentUnits).values(
      parcel.map(({ unitId, serial, certificate }) => {
        // The gate has let it pass, so it has one.
        if (certificate === null) throw new Error(`${serial} has no certificate.`);
        return { shipmentId, unitId, certificateId: certificate.id };
      }),
    );
    for (const { unitId, facts } of parcel) await advanceUnit(w, { id: unitId, stage: facts.stage }, 'ship');
    await w.record({
      action: 'shipment.pack',
      subjects: [
        { type: 'shipment', id: shipmentId },
        { type: 'order', id: order.id },
        ...parcel.map(({ unitId }) => ({ type: 'unit' as const, id: unitId })),
      ],
      details: {
        shipment: number,
        serials: parcel.map(({ serial }) => serial),
        certificates: parcel.flatMap(({ certificate }) => certificate?.number ?? []),
        weightG: input.weightG ?? null,
        stage: { from: 'pack', to: 'ship' },
      },
    });
    return { shipmentId, shipmentNumber: number };
  });
}

async function unitsScanned(tx: Tx, serials: readonly string[], gates: UnitGate[]): Promise<UnitGate[]> {
  if (serials.length === 0) throw invalid('Scan every unit that goes into the parcel.');
  const foreign = serials.filter((serial) => !gates.some((gate) => gate.serial === serial));
  if (foreign.length === 0) return gates.filter(({ serial }) => serials.includes(serial));
  const known = await tx
    .select({ serial: units.serial, orderNumber: orders.number })
    .from(units)
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .where(inArray(units.serial, [...foreign]));
  throw invalid(
    foreign
      .map((serial) => {
        const unit = known.find((one) => one.serial === serial);
        if (unit === undefined) return `There is no unit ${serial}.`;
        return unit.orderNumber === null
          ? `${serial} is meant for no order.`
          : `${serial} is for order ${unit.orderNumber}, not for this one.`;
      })
      .join(' '),
  );
}

async function refusePacked(tx: Tx, parcel: readonly UnitGate[]): Promise<void> {
  const packed = await tx
    .select({ serial: units.serial, shipment: shipments.number })
    .from(shipmentUnits)
    .innerJoin(shipments, eq(shipments.id, shipmentUnits.shipmentId))
    .innerJoin(units, eq(units.id, shipmentUnits.unitId))
    .where(
      and(
        eq(shipments.state, 'packed'),
        inArray(
          shipmentUnits.unitId,
          parcel.map(({ unitId }) => unitId),
        ),
      ),
    );
  if (packed.length === 0) return;
  throw new DomainError(
    'conflict',
    packed
      .map(
        ({ serial, shipment }) => `${serial} is packed already, in shipment ${shipment}. Unpack that first.`,
      )
      .join(' '),
  );
}

function invalid(sentence: string): DomainError {
  return new DomainError('invalid', sentence, { serials: sentence });
}
