import { and, desc, eq, inArray, isNotNull, isNull } from 'drizzle-orm';
import { rankCauses } from '~/domain/bench/rank-causes';
import type { LikelyCause, MendedCase, Symptom } from '~/domain/bench/rank-causes';
import { directionOf } from '~/domain/bench/usual-suspects';
import type { Reader } from '~/server/db/client';
import { reworks, runPoints, testPoints, testRuns, units } from '~/server/db/schema';
import { asBand } from './read-run-sheet';

const symptomColumns = {
  modelId: units.modelId,
  quantityKey: testPoints.quantityKey,
  band: testPoints.band,
  value: runPoints.value,
  upper: runPoints.upperLimit,
};

const failed = and(eq(runPoints.verdict, 'fail'), isNull(runPoints.concession));

/** The likely causes of what failed in a closed run, the likeliest first; none where nothing failed. */
export async function readLikelyCauses(reader: Reader, runId: number): Promise<LikelyCause[]> {
  const rows = await reader
    .select(symptomColumns)
    .from(runPoints)
    .innerJoin(testRuns, eq(testRuns.id, runPoints.testRunId))
    .innerJoin(units, eq(units.id, testRuns.unitId))
    .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
    .where(and(eq(runPoints.testRunId, runId), failed));
  const symptoms = rows.map(symptomOf);
  if (symptoms.length === 0) return [];
  return rankCauses(symptoms, await readCauseHistory(reader, symptoms));
}

/** The works' mended cases with a symptom of these quantities, the newest first; only those whose remedy held. */
async function readCauseHistory(reader: Reader, symptoms: readonly Symptom[]): Promise<MendedCase[]> {
  const quantityKeys = [...new Set(symptoms.map(({ quantityKey }) => quantityKey))];
  if (quantityKeys.length === 0) return [];
  const rows = await reader
    .select({
      id: reworks.id,
      cause: reworks.foundCause,
      remedy: reworks.remedy,
      minutes: reworks.minutes,
      ...symptomColumns,
    })
    .from(reworks)
    .innerJoin(units, eq(units.id, reworks.unitId))
    .innerJoin(runPoints, eq(runPoints.testRunId, reworks.testRunId))
    .innerJoin(testPoints, eq(testPoints.id, runPoints.testPointId))
    .where(
      and(
        isNotNull(reworks.confirmedByRunId),
        isNotNull(reworks.foundCause),
        inArray(testPoints.quantityKey, quantityKeys),
        failed,
      ),
    )
    .orderBy(desc(reworks.id));
  const cases = new Map<number, MendedCase & { symptoms: Symptom[] }>();
  for (const { id, cause, remedy, minutes, ...symptom } of rows) {
    const mended = cases.get(id) ?? { cause: cause ?? '', remedy, minutes, symptoms: [] };
    mended.symptoms.push(symptomOf(symptom));
    cases.set(id, mended);
  }
  return [...cases.values()];
}

function symptomOf(row: {
  modelId: number;
  quantityKey: string;
  band: string | null;
  value: number | null;
  upper: number | null;
}): Symptom {
  const { modelId, quantityKey, band } = row;
  return { modelId, quantityKey, band: asBand(band), direction: directionOf(row) };
}
