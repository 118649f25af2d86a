import { and, asc, desc, eq, isNull } from 'drizzle-orm';
import { alias } from 'drizzle-orm/mysql-core';
import { unknownQuantity } from '~/domain/bench/quantities';
import type { Reader } from '~/server/db/client';
import {
  certificates,
  ledgerEntries,
  ledgerSubjects,
  lots,
  parts,
  picks,
  reworks,
  runPoints,
  shipmentUnits,
  shipments,
  testPoints,
  testRuns,
  userProfiles,
} from '~/server/db/schema';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { findUnit } from './find-unit';
import { readKit } from './read-kit';
import { readSteps } from './read-steps';

export type UnitHistory = NonNullable<Awaited<ReturnType<typeof getUnitHistory>>>;

/** A unit with everything that happened to it and everything that is in it; null where there is none. */
export async function getUnitHistory(reader: Reader, serial: string) {
  const unit = await findUnit(reader, serial);
  if (unit === null) return null;
  const [steps, kit, kitFinishedAt, runs, reworked, issued, shipped, spareParts] = await Promise.all([
    readSteps(reader, unit),
    readKit(reader, unit),
    readKitFinish(reader, unit.id),
    readRuns(reader, unit.id),
    readReworks(reader, unit.id),
    readCertificates(reader, unit.id),
    readShipment(reader, unit.id),
    readLooseParts(reader, unit.id),
  ]);
  return {
    unit,
    steps,
    kit,
    kitFinishedAt,
    runs,
    reworks: reworked,
    certificates: issued,
    shipment: shipped,
    looseParts: spareParts,
  };
}

async function readKitFinish(reader: Reader, unitId: number) {
  const [entry] = await reader
    .select({ at: ledgerEntries.at, by: userProfiles.name, details: ledgerEntries.details })
    .from(ledgerSubjects)
    .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerSubjects.ledgerEntryId))
    .leftJoin(userProfiles, eq(userProfiles.userId, ledgerEntries.actorUserId))
    .where(
      and(
        eq(ledgerSubjects.subjectType, 'unit'),
        eq(ledgerSubjects.subjectId, unitId),
        eq(ledgerEntries.action, 'kit.finish'),
      ),
    )
    .orderBy(desc(ledgerEntries.id))
    .limit(1);
  if (entry === undefined) return null;
  const { minutes } = entry.details;
  return { at: entry.at, by: entry.by, minutes: typeof minutes === 'number' ? minutes : null };
}

async function readRuns(reader: Reader, unitId: number) {
  const runs = await reader
    .select({
      id: testRuns.id,
      runNo: testRuns.runNo,
      state: testRuns.state,
      result: testRuns.result,
      stoppedEarly: testRuns.stoppedEarly,
      openedAt: testRuns.openedAt,
      closedAt: testRuns.closedAt,
      tester: userProfiles.name,
    })
    .from(testRuns)
    .leftJoin(userProfiles, eq(userProfiles.userId, testRuns.testerUserId))
    .where(eq(testRuns.unitId, unitId))
    .orderBy(asc(testRuns.runNo));
  const quantities = await listQuantities(reader);
  const failed = await reader
    .select({
      runId: runPoints.testRunId,
      verdict: runPoints.verdict,
      value: runPoints.value,
      lower: runPoints.lowerLimit,
      upper: runPoints.upperLimit,
      quantityKey: testPoints.quantityKey,
      band: testPoints.band,
    })
    .from(runPoints)
    .innerJoin(testRuns, eq(testRuns.id, runPoints.testRunId))
    .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
    .where(and(eq(testRuns.unitId, unitId), eq(runPoints.verdict, 'fail')))
    .orderBy(asc(testPoints.position));
  const named = failed.map(({ quantityKey, ...point }) => ({
    ...point,
    quantity: quantities.get(quantityKey) ?? unknownQuantity(quantityKey),
  }));
  return runs.map((run) => ({ ...run, failed: named.filter(({ runId }) => runId === run.id) }));
}

async function readReworks(reader: Reader, unitId: number) {
  const opener = alias(userProfiles, 'opener');
  const closer = alias(userProfiles, 'closer');
  return reader
    .select({
      id: reworks.id,
      cause: reworks.cause,
      foundCause: reworks.foundCause,
      remedy: reworks.remedy,
      minutes: reworks.minutes,
      openedAt: reworks.openedAt,
      openedBy: opener.name,
      closedAt: reworks.closedAt,
      closedBy: closer.name,
      confirmedByRunNo: testRuns.runNo,
    })
    .from(reworks)
    .leftJoin(testRuns, eq(testRuns.id, reworks.confirmedByRunId))
    .leftJoin(opener, eq(opener.userId, reworks.openedBy))
    .leftJoin(closer, eq(closer.userId, reworks.closedBy))
    .where(eq(reworks.unitId, unitId))
    .orderBy(asc(reworks.id));
}

async function readCertificates(reader: Reader, unitId: number) {
  return reader
    .select({
      number: certificates.number,
      letter: certificates.letter,
      testRunId: certificates.testRunId,
      issuedAt: certificates.issuedAt,
      issuedBy: userProfiles.name,
    })
    .from(certificates)
    .leftJoin(userProfiles, eq(userProfiles.userId, certificates.issuedBy))
    .where(eq(certificates.unitId, unitId))
    .orderBy(asc(certificates.id));
}

async function readShipment(reader: Reader, unitId: number) {
  const [row] = await reader
    .select({
      number: shipments.number,
      carrier: shipments.carrier,
      trackingNumber: shipments.trackingNumber,
      packedAt: shipments.packedAt,
      shippedAt: shipments.shippedAt,
    })
    .from(shipmentUnits)
    .innerJoin(shipments, eq(shipments.id, shipmentUnits.shipmentId))
    .where(eq(shipmentUnits.unitId, unitId))
    .orderBy(desc(shipments.id))
    .limit(1);
  return row ?? null;
}

/** Parts from lots that stand on no line of the BOM: what a repair has added. */
async function readLooseParts(reader: Reader, unitId: number) {
  return reader
    .select({
      lot: lots.number,
      part: parts.number,
      description: parts.description,
      quantity: picks.quantity,
    })
    .from(picks)
    .innerJoin(lots, eq(lots.id, picks.lotId))
    .innerJoin(parts, eq(parts.id, lots.partId))
    .where(and(eq(picks.unitId, unitId), isNull(picks.bomLineId), isNull(picks.undoneByEntryId)));
}
