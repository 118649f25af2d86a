import { formatNumber } from '~/domain/bench/format';
import { lineSpacing } from '~/domain/bench/sweep/analyse-sweep';
import { lookAtSweep } from '~/domain/bench/sweep/look-at-sweep';
import type { NamedAnalysis, SweepLook, SweepReading } from '~/domain/bench/sweep/look-at-sweep';
import { strongestIn } from '~/domain/bench/sweep/peaks';
import type { Sweep, SweepHints } from '~/domain/bench/sweep/types';
import type { BandKey, TestPoint } from '~/domain/bench/types';
import { sweeps } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { storeFile } from '~/server/files/store-file';
import { readRunForSweep } from '~/server/queries/bench/read-run-for-sweep';
import type { StoredReading } from '~/server/queries/bench/read-run-sheet';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { mustBeInUse } from './equipment-in-use';
import type { Equipment } from './equipment-in-use';
import { lockOwnRun } from './lock-run';
import { putReading } from './put-reading';
import type { PutReading } from './put-reading';

interface Input extends Equipment {
  runId: number;
  /** Null tells it by the carrier. */
  band: BandKey | null;
  bytes: Uint8Array;
  name: string;
  /** What the person answered or corrected. */
  hints: SweepHints;
  /** The person says that what was understood is right, where a question asks no more than that. */
  understood?: boolean;
  attenuationHeld?: boolean;
}

/** A sweep that can be accepted. */
interface Accepted extends SweepLook {
  band: BandKey;
  analysis: NamedAnalysis;
  sweep: Sweep;
}

/** One of the sweep's readings, and the one that it corrects; null where it is another. */
interface Placed {
  reading: SweepReading;
  corrects: StoredReading | null;
}

/**
 * Reads a spectrum file into a run: keeps the file, what was understood of it, and a reading for each harmonic
 * and each other product that the plan has a point for on this band. A file that is no usable sweep is refused
 * with a sentence, and nothing is stored.
 *
 * @throws DomainError `refused` with field `file` or `band`, or with field `hints` where the person must answer
 * something first; `conflict`, `taken`, `not_found`
 */
export async function readSweepIntoRun(
  input: Input,
  ctx: Ctx,
): Promise<{ sweepId: number; band: BandKey; readings: number; notes: string[] }> {
  return write(ctx, async (w) => {
    const run = await lockOwnRun(w, input.runId);
    await mustBeInUse(w, input);
    const ground = await readRunForSweep(w.tx, run.row.id, input.pathRevisionId);
    if (ground === null) throw new DomainError('not_found', 'There is no such run.');
    const look = lookAtSweep(input.bytes, input.hints, input.band, ground);
    if (!look.ok) throw refuse(look.reason, 'file');
    const accepted = mustBeAcceptable(look, input.understood === true);

    const fileId = await storeFile(w, { bytes: input.bytes, name: input.name });
    const sweepId = await insertSweep(w, input, accepted, fileId);
    const put: {
      point: string;
      product: string | null;
      from: PutReading['from'];
      to: number;
      atMost: boolean;
    }[] = [];
    const numbers = new Map<number, number>();
    for (const { reading, corrects } of place(accepted, ground.sheet.readings)) {
      const point = ground.sheet.points.find(({ id }) => id === reading.testPointId);
      if (point === undefined) continue;
      const { from, readingNo } = await putReading(w, run.row, point, ground.sheet.readings, {
        ...{ again: corrects === null, corrects, after: numbers.get(point.id) },
        enteredText: formatNumber(reading.meterDbc, 2),
        enteredUnit: 'dBc',
        value: reading.meterDbc,
        freqHz: freqOf(reading, point),
        atMost: reading.atMost,
        attenuationHeld: input.attenuationHeld ?? false,
        source: 'sweep',
        sweepId,
        instrumentRevisionId: input.instrumentRevisionId,
        pathRevisionId: input.pathRevisionId,
      });
      numbers.set(point.id, Math.max(readingNo, numbers.get(point.id) ?? 0));
      put.push({
        ...{ point: reading.label, product: reading.name, from },
        ...{ to: reading.meterDbc, atMost: reading.atMost },
      });
    }
    await w.record({
      action: 'sweep.read',
      subjects: [
        { type: 'run', id: run.row.id },
        { type: 'unit', id: run.row.unitId },
      ],
      details: { sweepId, band: accepted.band, readings: put },
    });
    return { sweepId, band: accepted.band, readings: put.length, notes: accepted.notes };
  });
}

/** A product has its own frequency, everything else that of its test point. */
function freqOf(reading: SweepReading, point: TestPoint): number | null {
  return point.quantity.key === 'spurious' ? reading.freqHz : point.freqHz;
}

function refuse(reason: string, field: 'file' | 'hints' | 'band'): DomainError {
  return new DomainError('refused', reason, { [field]: reason });
}

function mustBeAcceptable(look: SweepLook & { sweep: Sweep }, understood: boolean): Accepted {
  const { band, analysis, refusal, questions, readings } = look;
  const open = questions.filter(({ needsValue }) => needsValue || !understood);
  // What is asked may be just what stands in the way, so it comes first.
  if (open.length > 0) throw refuse(open.map(({ text }) => text).join(' '), 'hints');
  if (refusal !== null) throw refuse(refusal, band === null ? 'band' : 'file');
  if (band === null || analysis === null || readings.length === 0) {
    throw refuse('The test plan has no point on this band that a sweep could fill.', 'band');
  }
  return { ...look, band, analysis };
}

/**
 * Which reading corrects which. A harmonic corrects the newest of its point, as retyping its cell would. A product
 * corrects the one that an earlier sweep found at the same frequency; one that an earlier sweep found and this
 * one does not is corrected to what stands there now, so that a mended unit need not carry it on.
 */
function place({ readings, sweep, analysis }: Accepted, before: readonly StoredReading[]): Placed[] {
  const spacing = lineSpacing(sweep.understood);
  const bySweep = before.filter(
    (each) => each.source === 'sweep' && !each.voided && each.quantityKey === 'spurious',
  );
  const placed: Placed[] = [];
  const corrected = new Set<number>();
  for (const reading of readings) {
    if (reading.name === null) {
      const own = before.filter((each) => each.testPointId === reading.testPointId && !each.voided);
      placed.push({ reading, corrects: own.sort((a, b) => b.readingNo - a.readingNo)[0] ?? null });
      continue;
    }
    const same = bySweep.find(
      (each) =>
        each.testPointId === reading.testPointId &&
        !corrected.has(each.id) &&
        Math.abs((each.freqHz ?? NaN) - (reading.freqHz ?? NaN)) <= spacing,
    );
    if (same !== undefined) corrected.add(same.id);
    placed.push({ reading, corrects: same ?? null });
  }
  const ownPoints = new Set(readings.map(({ testPointId }) => testPointId));
  for (const gone of bySweep) {
    const { freqHz, testPointId, id } = gone;
    if (corrected.has(id) || freqHz === null || !ownPoints.has(testPointId)) continue;
    const now = strongestIn(sweep.points.freqHz, sweep.points.level, freqHz - spacing, freqHz + spacing);
    if (now === null) continue;
    const meterDbc = now.level - analysis.fundamental.levelDbm;
    const label = readings.find((each) => each.testPointId === testPointId)?.label ?? '';
    placed.push({
      reading: { testPointId, label, meterDbc, unitDbc: meterDbc, freqHz, atMost: true, name: 'gone' },
      corrects: gone,
    });
  }
  return placed;
}

async function insertSweep(
  w: WriteContext,
  { runId, hints, instrumentRevisionId, pathRevisionId }: Input,
  { band, understood, notes, analysis, trace }: Accepted,
  fileId: number,
): Promise<number> {
  const [{ insertId }] = await w.tx.insert(sweeps).values({
    testRunId: runId,
    fileId,
    band,
    understood: { understood, notes, hints, analysis, instrumentRevisionId, pathRevisionId, trace },
    createdAt: w.now,
    byUserId: actingUserId(w),
  });
  return insertId;
}
