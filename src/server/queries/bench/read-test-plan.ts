import { createHash } from 'node:crypto';
import { and, eq, isNotNull } from 'drizzle-orm';
import { regionOf } from '~/domain/bench/bands';
import type { OutputStage, Region, TestPoint } from '~/domain/bench/types';
import { compareLetters } from '~/lib/revision-letters';
import { outputStageSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import {
  batches,
  models,
  orderLines,
  orders,
  testPlanRevisions,
  testRuns,
  units,
  userProfiles,
  works,
} from '~/server/db/schema';
import { listTestPoints } from './read-run-sheet';

/** A revision of a model's test plan with all that stands in it. */
export interface TestPlan {
  model: { id: number; slug: string; name: string; ratedPowerW: number };
  id: number;
  letter: string;
  state: 'draft' | 'released' | 'retired';
  note: string;
  supplyV: number;
  loadOhm: number;
  outputStage: OutputStage | null;
  createdAt: Date;
  releasedAt: Date | null;
  releasedBy: string | null;
  points: TestPoint[];
  /** Of what stands in it; another one after anybody has changed it. */
  stamp: string;
  /** All revisions of the model, the newest first. */
  revisions: { letter: string; state: 'draft' | 'released' | 'retired' }[];
}

/** A test plan revision by its model and letter; null where there is none. */
export async function readTestPlan(reader: Reader, slug: string, letter: string): Promise<TestPlan | null> {
  const rows = await reader
    .select({
      model: {
        id: models.id,
        slug: models.slug,
        name: models.name,
        ratedPowerW: models.ratedPowerW,
      },
      revision: testPlanRevisions,
      releasedBy: userProfiles.name,
    })
    .from(testPlanRevisions)
    .innerJoin(models, eq(models.id, testPlanRevisions.modelId))
    .leftJoin(userProfiles, eq(userProfiles.userId, testPlanRevisions.releasedBy))
    .where(eq(models.slug, slug));
  const found = rows.find(({ revision }) => revision.letter === letter.toUpperCase());
  if (found === undefined) return null;
  const { model, revision, releasedBy } = found;
  const points = await listTestPoints(reader, revision.id);
  const outputStage = revision.outputStage === null ? null : outputStageSchema.parse(revision.outputStage);
  const { id, state, note, supplyV, loadOhm, createdAt, releasedAt } = revision;
  return {
    ...{ model, id, letter: revision.letter, state, note, supplyV, loadOhm, outputStage },
    ...{ createdAt, releasedAt, releasedBy, points },
    stamp: stampOf({ note, supplyV, loadOhm, outputStage, points }),
    revisions: rows
      .map(({ revision: each }) => ({ letter: each.letter, state: each.state }))
      .sort((a, b) => compareLetters(b.letter, a.letter)),
  };
}

type Content = Pick<TestPlan, 'note' | 'supplyV' | 'loadOhm' | 'outputStage' | 'points'>;

/** Two editors are told apart by it, as what they began with differs. */
function stampOf({ note, supplyV, loadOhm, outputStage, points }: Content): string {
  const rows = points.map(({ id: _, quantity, ...point }) => [quantity.key, Object.entries(point).sort()]);
  const text = JSON.stringify([note, supplyV, loadOhm, outputStage, rows]);
  return createHash('sha256').update(text).digest('hex').slice(0, 16);
}

/** The ITU Regions into which a model goes: where its units were ordered to or tested for, and the works' own; else all. */
export async function listRegionsOfModel(reader: Reader, modelId: number): Promise<Region[]> {
  const [ordered, tested, own] = await Promise.all([
    reader
      .selectDistinct({ country: orders.destinationCountry })
      .from(orderLines)
      .innerJoin(orders, eq(orders.id, orderLines.orderId))
      .innerJoin(batches, eq(batches.id, orderLines.batchId))
      .where(eq(batches.modelId, modelId)),
    reader
      .selectDistinct({ country: testRuns.destinationCountry })
      .from(testRuns)
      .innerJoin(units, eq(units.id, testRuns.unitId))
      .where(and(eq(units.modelId, modelId), isNotNull(testRuns.destinationCountry))),
    reader.select({ country: works.country }).from(works).limit(1),
  ]);
  const regions = [...ordered, ...tested, ...own].flatMap(({ country }) => {
    const region = country === null ? null : regionOf(country);
    return region === null ? [] : [region];
  });
  const known = ([1, 2, 3] as const).filter((region) => regions.includes(region));
  return known.length === 0 ? [1, 2, 3] : known;
}
