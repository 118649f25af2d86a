import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import { z } from 'zod';
import { invariant } from '~/lib/invariant';
import { pathSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import {
  batches,
  bomRevisions,
  contacts,
  models,
  optionGroups,
  options,
  orderLines,
  orders,
  pathRevisions,
  paths,
  readings,
  reworks,
  sweeps,
  testPlanRevisions,
  testRuns,
  units,
  userProfiles,
} from '~/server/db/schema';
import { asBand } from '~/server/queries/bench/read-run-sheet';

/** What a certificate says about a run besides its readings. */
export async function readCertificateFacts(reader: Reader, runId: number) {
  const [row] = await reader
    .select({
      run: testRuns,
      unit: units,
      modelName: models.name,
      batchNumber: batches.number,
      bomLetter: bomRevisions.letter,
      planLetter: testPlanRevisions.letter,
      planSupplyV: testPlanRevisions.supplyV,
      planLoadOhm: testPlanRevisions.loadOhm,
      testerName: userProfiles.name,
      orderNumber: orders.number,
      orderCountry: orders.destinationCountry,
      contactId: contacts.id,
      callSign: contacts.callSign,
    })
    .from(testRuns)
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, testRuns.testPlanRevisionId))
    .innerJoin(userProfiles, eq(userProfiles.userId, testRuns.testerUserId))
    .leftJoin(batches, eq(batches.id, units.batchId))
    .leftJoin(bomRevisions, eq(bomRevisions.id, units.bomRevisionId))
    .leftJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .leftJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(contacts, eq(contacts.id, orders.contactId))
    .where(eq(testRuns.id, runId));
  invariant(row !== undefined, 'the run is there');
  const [optionLabels, earlierRuns] = await Promise.all([
    listOptionLabels(reader, row.unit.modelId, row.unit.options),
    listEarlierRuns(reader, row.unit.id, row.run.runNo),
  ]);
  return { ...row, optionLabels, earlierRuns };
}

/** The labels of the chosen options, in the order in which the shop shows them. */
async function listOptionLabels(reader: Reader, modelId: number, keys: readonly string[]): Promise<string[]> {
  if (keys.length === 0) return [];
  const rows = await reader
    .select({ label: options.label })
    .from(options)
    .innerJoin(optionGroups, eq(optionGroups.id, options.optionGroupId))
    .where(and(eq(optionGroups.modelId, modelId), inArray(options.key, [...keys])))
    .orderBy(asc(optionGroups.position), asc(options.position));
  return rows.map(({ label }) => label);
}

/** What became of the unit's earlier runs, and the rework between. */
async function listEarlierRuns(reader: Reader, unitId: number, before: number): Promise<string[]> {
  const [runs, mended] = await Promise.all([
    reader.select().from(testRuns).where(eq(testRuns.unitId, unitId)).orderBy(asc(testRuns.runNo)),
    reader.select().from(reworks).where(eq(reworks.unitId, unitId)),
  ]);
  return runs
    .filter(({ runNo }) => runNo < before)
    .map(({ id, runNo, result }) => {
      const reworked = mended.some(({ testRunId }) => testRunId === id);
      return `run ${runNo} ${result ?? 'left open'}${reworked ? ', reworked' : ''}`;
    });
}

/** The paths of these revisions, for a certificate. */
export async function listUsedPaths(reader: Reader, revisionIds: number[]) {
  if (revisionIds.length === 0) return [];
  const rows = await reader
    .select({ number: paths.number, name: paths.name, spec: pathRevisions.spec })
    .from(pathRevisions)
    .innerJoin(paths, eq(paths.id, pathRevisions.pathId))
    .where(inArray(pathRevisions.id, revisionIds))
    .orderBy(asc(paths.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: pathSpecSchema.parse(spec) }));
}

const spanSchema = z.object({ understood: z.object({ spanHz: z.tuple([z.number(), z.number()]) }) });

/** What the sweeps whose readings count covered of the spectrum, by band. */
export async function listSweepSpans(reader: Reader, runId: number) {
  const rows = await reader
    .selectDistinct({ id: sweeps.id, band: sweeps.band, understood: sweeps.understood })
    .from(sweeps)
    .innerJoin(readings, and(eq(readings.sweepId, sweeps.id), isNull(readings.voidedAt)))
    .where(eq(sweeps.testRunId, runId))
    .orderBy(asc(sweeps.id));
  return rows.map(({ band, understood }) => {
    const [fromHz, toHz] = spanSchema.parse(understood).understood.spanHz;
    return { band: asBand(band), fromHz, toHz };
  });
}
