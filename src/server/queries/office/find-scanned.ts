import { and, eq, like, ne, or, sql } from 'drizzle-orm';
import { paths } from '~/lib/paths';
import { normaliseScan } from '~/lib/serials';
import type { Reader } from '~/server/db/client';
import { batches, bins, certificates, lots, orders, parts, shipments, units } from '~/server/db/schema';

export interface ScanMatch {
  kind: 'unit' | 'lot' | 'part' | 'order' | 'batch' | 'certificate' | 'tracking number' | 'bin';
  label: string;
  href: string;
}

/**
 * What a scanned or typed text names: unit, order, batch, part, lot, certificate or tracking number. Case,
 * spaces and look-alikes do not matter. More than one match where a bare number could be several things.
 */
export async function findScanned(reader: Reader, text: string): Promise<ScanMatch[]> {
  const scanned = normaliseScan(text);
  if (scanned === '') return [];
  const asNumber = /^\d{1,9}$/.test(scanned) ? Number(scanned) : null;
  const compact = scanned.replaceAll('-', '');
  const found = await Promise.all([
    reader.select({ serial: units.serial }).from(units).where(eq(units.serial, scanned)),
    reader.select({ number: lots.number }).from(lots).where(eq(lots.number, scanned)),
    reader
      .select({ number: parts.number })
      .from(parts)
      .where(sql`upper(${parts.number}) in (${scanned}, ${text.trim().toUpperCase()})`),
    asNumber === null
      ? []
      : reader.select({ number: orders.number }).from(orders).where(eq(orders.number, asNumber)),
    asNumber === null
      ? []
      : reader.select({ number: batches.number }).from(batches).where(eq(batches.number, asNumber)),
    reader
      .select({ number: certificates.number, letter: certificates.letter })
      .from(certificates)
      .where(
        or(
          eq(sql`concat(${certificates.number}, ${certificates.letter})`, scanned),
          eq(certificates.code, compact.slice(0, 12)),
        ),
      ),
    reader
      .select({ number: shipments.number })
      .from(shipments)
      .where(and(ne(shipments.trackingNumber, ''), eq(shipments.trackingNumber, compact))),
    reader
      .select({ lot: lots.number })
      .from(lots)
      .innerJoin(bins, eq(bins.id, lots.binId))
      .where(and(eq(bins.code, scanned), sql`${lots.onHand} > 0`)),
  ]);
  const [unitRows, lotRows, partRows, orderRows, batchRows, certificateRows, shipmentRows, binRows] = found;
  return [
    ...unitRows.map(({ serial }) => ({ kind: 'unit' as const, label: serial, href: paths.unit(serial) })),
    ...lotRows.map(({ number }) => ({ kind: 'lot' as const, label: number, href: paths.lot(number) })),
    ...partRows.map(({ number }) => ({ kind: 'part' as const, label: number, href: paths.part(number) })),
    ...orderRows.map(({ number }) => ({
      kind: 'order' as const,
      label: `order ${number}`,
      href: paths.worksOrder(number),
    })),
    ...batchRows.map(({ number }) => ({
      kind: 'batch' as const,
      label: `batch ${number}`,
      href: paths.batch(number),
    })),
    ...certificateRows.map(({ number, letter }) => ({
      kind: 'certificate' as const,
      label: `${number}${letter}`,
      href: paths.worksCertificate(`${number}${letter}`),
    })),
    ...shipmentRows.map(({ number }) => ({
      kind: 'tracking number' as const,
      label: `shipment ${number}`,
      href: paths.shipment(number),
    })),
    ...binRows.map(({ lot }) => ({
      kind: 'bin' as const,
      label: `${lot} in bin ${scanned}`,
      href: paths.lot(lot),
    })),
  ];
}

/** Serial and lot numbers that end or begin as the text does, where nothing is named by it exactly. */
export async function findNearMatches(reader: Reader, text: string): Promise<ScanMatch[]> {
  const scanned = normaliseScan(text).replaceAll(/[%_\\]/g, '');
  if (scanned.length < 2) return [];
  const pattern = `%${scanned}%`;
  const [unitRows, lotRows, partRows] = await Promise.all([
    reader.select({ serial: units.serial }).from(units).where(like(units.serial, pattern)).limit(8),
    reader.select({ number: lots.number }).from(lots).where(like(lots.number, pattern)).limit(8),
    reader
      .select({ number: parts.number })
      .from(parts)
      .where(like(sql`upper(${parts.number})`, pattern))
      .limit(8),
  ]);
  return [
    ...unitRows.map(({ serial }) => ({ kind: 'unit' as const, label: serial, href: paths.unit(serial) })),
    ...lotRows.map(({ number }) => ({ kind: 'lot' as const, label: number, href: paths.lot(number) })),
    ...partRows.map(({ number }) => ({ kind: 'part' as const, label: number, href: paths.part(number) })),
  ];
}
