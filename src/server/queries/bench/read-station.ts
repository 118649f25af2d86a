import { and, asc, desc, eq, inArray, lt } from 'drizzle-orm';
import { destinationNote } from '~/domain/bench/bands';
import { formatValue } from '~/domain/bench/format';
import { pointLabel } from '~/domain/bench/judge-run';
import { unknownQuantity } from '~/domain/bench/quantities';
import { countryName } from '~/lib/countries';
import { formatTimeOf } from '~/lib/dates';
import { normaliseScan } from '~/lib/serials';
import { stationSchema } from '~/schemas/bench-station';
import { keptSweepSchema } from '~/schemas/bench-sweeps';
import type { Station } from '~/schemas/bench-station';
import type { Reader } from '~/server/db/client';
import {
  certificates,
  files,
  models,
  reworks,
  runPoints,
  sweeps,
  testPlanRevisions,
  testPoints,
  testRuns,
  units,
  userProfiles,
} from '~/server/db/schema';
import { getWorks } from '~/server/queries/office/get-works';
import { findUnit } from '~/server/queries/production/find-unit';
import type { FoundUnit } from '~/server/queries/production/find-unit';
import { listQuantities } from './list-quantities';
import { asBand, readRunSheet } from './read-run-sheet';

/** A run's id by its unit's serial number as scanned or typed; null where there is none. */
export async function findRun(reader: Reader, serial: string, runNo: number): Promise<number | null> {
  const [found] = await reader
    .select({ id: testRuns.id })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .where(and(eq(units.serial, normaliseScan(serial)), eq(testRuns.runNo, runNo)));
  return found?.id ?? null;
}

/** A run with all that its station shows; null where there is none. */
export async function readStation(reader: Reader, runId: number): Promise<Station | null> {
  const [row] = await reader
    .select({
      run: testRuns,
      serial: units.serial,
      ratedPowerW: models.ratedPowerW,
      letter: testPlanRevisions.letter,
      supplyV: testPlanRevisions.supplyV,
      loadOhm: testPlanRevisions.loadOhm,
      testerName: userProfiles.name,
    })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, testRuns.testPlanRevisionId))
    .leftJoin(userProfiles, eq(userProfiles.userId, testRuns.testerUserId))
    .where(eq(testRuns.id, runId));
  if (row === undefined) return null;
  const { run, ratedPowerW, letter, supplyV, loadOhm } = row;
  const [sheet, unit, { timeZone }] = await Promise.all([
    readRunSheet(reader, runId),
    findUnit(reader, row.serial),
    getWorks(reader),
  ]);
  const [earlier, kept, loaded, newest, certificate] = await Promise.all([
    listEarlier(reader, run.unitId, run.runNo, timeZone),
    listKept(reader, runId),
    listSweeps(reader, runId),
    reader.select({ runNo: testRuns.runNo }).from(testRuns).where(eq(testRuns.unitId, run.unitId)),
    findCertificate(reader, runId),
  ]);
  const { rule } = sheet;
  const { destinationCountry: country } = run;
  return stationSchema.parse({
    run: {
      ...run,
      testerName: row.testerName ?? 'somebody who has left',
      openedText: formatTimeOf(run.openedAt, timeZone),
      closedText: run.closedAt === null ? null : formatTimeOf(run.closedAt, timeZone),
      isNewest: newest.every(({ runNo }) => runNo <= run.runNo),
    },
    unit: { serial: row.serial, ...tagLines(unit), ratedPowerW },
    plan: { letter, supplyV, loadOhm },
    limits: {
      title: rule.title,
      source: rule.source,
      note: rule.note,
      destination: country === null ? 'no buyer yet' : destinationOf(country),
    },
    earlier,
    certificateNumber: certificate,
    sheet,
    kept,
    sweeps: loaded,
  });
}

function destinationOf(country: string): string {
  const note = destinationNote(country);
  return note === null ? countryName(country) : `${countryName(country)}. ${note}`;
}

/** What the tag says beneath the serial number; the buyer by call sign only. */
function tagLines(unit: FoundUnit | null): { line: string; quiet: string } {
  if (unit === null) return { line: '', quiet: '' };
  const { modelName, optionLabels, batchNumber, orderNumber, callSign } = unit;
  const quiet = [
    ...(batchNumber === null ? [] : [`Batch ${batchNumber}`]),
    ...(orderNumber === null ? ['no order'] : [`order ${orderNumber}`]),
    ...(callSign === null ? [] : [callSign]),
  ];
  return { line: [modelName, ...optionLabels].join(' · '), quiet: quiet.join(' · ') };
}

async function listEarlier(reader: Reader, unitId: number, before: number, timeZone: string) {
  const runs = await reader
    .select({
      id: testRuns.id,
      runNo: testRuns.runNo,
      result: testRuns.result,
      closedAt: testRuns.closedAt,
      tester: userProfiles.name,
    })
    .from(testRuns)
    .leftJoin(userProfiles, eq(userProfiles.userId, testRuns.testerUserId))
    .where(and(eq(testRuns.unitId, unitId), lt(testRuns.runNo, before)))
    .orderBy(desc(testRuns.runNo));
  if (runs.length === 0) return [];
  const ids = runs.map(({ id }) => id);
  const [quantities, failed, mended] = await Promise.all([
    listQuantities(reader),
    reader
      .select({
        runId: runPoints.testRunId,
        value: runPoints.value,
        quantityKey: testPoints.quantityKey,
        band: testPoints.band,
      })
      .from(runPoints)
      .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
      .where(and(inArray(runPoints.testRunId, ids), inArray(runPoints.verdict, ['fail', 'too_close'])))
      .orderBy(asc(testPoints.position)),
    reader.select().from(reworks).where(inArray(reworks.testRunId, ids)),
  ]);
  return runs.map(({ id, runNo, result, closedAt, tester }) => {
    const rework = mended.find(({ testRunId }) => testRunId === id);
    const closed = closedAt === null ? 'open' : formatTimeOf(closedAt, timeZone);
    return {
      runNo,
      result,
      text: tester === null ? closed : `${closed} by ${tester}`,
      failed: failed
        .filter(({ runId }) => runId === id)
        .map(({ quantityKey, band, value }) => {
          const quantity = quantities.get(quantityKey) ?? unknownQuantity(quantityKey);
          const read = value === null ? '' : ` ${formatValue(value, quantity)}`;
          return pointLabel({ quantity, band: asBand(band) }) + read;
        }),
      rework: rework === undefined ? null : (rework.remedy ?? 'in rework'),
    };
  });
}

async function listKept(reader: Reader, runId: number) {
  return reader
    .select({
      testPointId: runPoints.testPointId,
      verdict: runPoints.verdict,
      value: runPoints.value,
      U: runPoints.expandedUncertainty,
      k: runPoints.coverageFactor,
      n: runPoints.readingCount,
      lower: runPoints.lowerLimit,
      upper: runPoints.upperLimit,
      ruleKey: runPoints.ruleKey,
      ruleText: runPoints.ruleText,
      pConform: runPoints.probabilityOfConformance,
      concession: runPoints.concession,
    })
    .from(runPoints)
    .where(eq(runPoints.testRunId, runId));
}

async function listSweeps(reader: Reader, runId: number) {
  const rows = await reader
    .select({
      id: sweeps.id,
      band: sweeps.band,
      understood: sweeps.understood,
      fileName: files.name,
      at: sweeps.createdAt,
    })
    .from(sweeps)
    .innerJoin(files, eq(files.id, sweeps.fileId))
    .where(eq(sweeps.testRunId, runId))
    .orderBy(desc(sweeps.id));
  return rows.map(({ understood, ...row }) => ({ ...row, ...keptSweepSchema.parse(understood) }));
}

async function findCertificate(reader: Reader, runId: number): Promise<string | null> {
  const [row] = await reader
    .select({ number: certificates.number, letter: certificates.letter })
    .from(certificates)
    .where(eq(certificates.testRunId, runId))
    .orderBy(desc(certificates.id))
    .limit(1);
  return row === undefined ? null : `${row.number}${row.letter}`;
}
