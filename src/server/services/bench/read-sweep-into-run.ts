import { formatNumber } from '~/domain/bench/format';
import { carrierOf } from '~/domain/bench/judge-point';
import { judgeRun, pointLabel } from '~/domain/bench/judge-run';
import { limitDbc } from '~/domain/bench/limit-rules';
import { quantityOf } from '~/domain/bench/quantities';
import { analyseSweep } from '~/domain/bench/sweep/analyse-sweep';
import type { SweepAnalysis } from '~/domain/bench/sweep/analyse-sweep';
import { readSweep } from '~/domain/bench/sweep/read-sweep';
import { strongestElsewhere } from '~/domain/bench/sweep/strongest-elsewhere';
import { thinTrace } from '~/domain/bench/sweep/thin-trace';
import type { Sweep, SweepHints } from '~/domain/bench/sweep/types';
import type { BandKey, PathSpec, TestPoint } from '~/domain/bench/types';
import { sweeps } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { storeFile } from '~/server/files/store-file';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import type { StoredSheet } from '~/server/queries/bench/read-run-sheet';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { mustBeInUse } from './equipment-in-use';
import type { Equipment } from './equipment-in-use';
import { lockOwnRun } from './lock-run';
import { putReading } from './put-reading';

interface Input extends Equipment {
  runId: number;
  band: BandKey;
  bytes: Uint8Array;
  name: string;
  /** What the person answered or corrected. */
  hints: SweepHints;
  /** The person says that what was understood is right, where a question has no other answer. */
  understood?: boolean;
  attenuationHeld?: boolean;
}

/** A level found in a sweep, dBc at the meter. */
interface Found {
  meterDbc: number;
  freqHz: number | null;
  atMost: boolean;
}

const drawnPoints = 800;

/**
 * Reads a spectrum file into a run: keeps the file, what was understood of it, and a reading for each harmonic
 * (and for the strongest other product) that the plan has on this band. A file that is no usable sweep of this
 * band is refused with a sentence, and nothing is stored.
 *
 * @throws DomainError `refused` with field `file`, or with field `hints` where the person must answer something
 * first; `conflict`, `taken`, `not_found`
 */
export async function readSweepIntoRun(
  input: Input,
  ctx: Ctx,
): Promise<{ sweepId: number; readings: number; notes: string[] }> {
  return write(ctx, async (w) => {
    const run = await lockOwnRun(w, input.runId);
    const sheet = await readRunSheet(w.tx, run.row.id);
    const path = await mustBeInUse(w, input);
    const { sweep, analysis } = understand(input, sheet, path);
    const fileId = await storeFile(w, { bytes: input.bytes, name: input.name });
    const sweepId = await insertSweep(w, input, { fileId, sweep, analysis });
    const put: { point: string; from: unknown; to: number; atMost: boolean }[] = [];
    for (const point of sheet.points.filter(({ band }) => band === input.band)) {
      const found = findIn(point, sweep, analysis);
      if (found === null) continue;
      const { from } = await putReading(w, run.row, point, sheet.readings, {
        again: false,
        enteredText: formatNumber(found.meterDbc, 2),
        enteredUnit: 'dBc',
        value: found.meterDbc,
        freqHz: found.freqHz,
        atMost: found.atMost,
        attenuationHeld: input.attenuationHeld ?? false,
        source: 'sweep',
        sweepId,
        instrumentRevisionId: input.instrumentRevisionId,
        pathRevisionId: input.pathRevisionId,
      });
      put.push({ point: pointLabel(point), from, to: found.meterDbc, atMost: found.atMost });
    }
    await w.record({
      action: 'sweep.read',
      subjects: [
        { type: 'run', id: run.row.id },
        { type: 'unit', id: run.row.unitId },
      ],
      details: { sweepId, band: input.band, readings: put },
    });
    return { sweepId, readings: put.length, notes: sweep.notes };
  });
}

function refuse(reason: string, field: 'file' | 'hints' | 'band'): DomainError {
  return new DomainError('refused', reason, { [field]: reason });
}

function understand(
  input: Input,
  sheet: StoredSheet,
  path: PathSpec | null,
): { sweep: Sweep; analysis: SweepAnalysis } {
  const testFreqHz = sheet.points.find(({ band, freqHz }) => band === input.band && freqHz !== null)?.freqHz;
  if (testFreqHz === undefined || testFreqHz === null) {
    throw refuse('The test plan states no test frequency on this band.', 'band');
  }
  const sweep = readSweep(input.bytes, input.hints);
  if (!sweep.ok) throw refuse(sweep.reason, 'file');
  if (sweep.questions.length > 0 && input.understood !== true)
    throw refuse(sweep.questions.join(' '), 'hints');
  const analysis = analyseSweep(sweep, {
    testFreqHz,
    path,
    limitDbcAt: limitOf(sheet, input.band, testFreqHz),
  });
  if (!analysis.ok) throw refuse(analysis.reason, 'file');
  return { sweep, analysis };
}

/** The limit that a product of this band has by the power measured on it; null where there is none yet. */
function limitOf(sheet: StoredSheet, band: BandKey, txFreqHz: number) {
  const power = sheet.points.find((point) => point.band === band && point.quantityKey === 'rf_power');
  const judged = power === undefined ? undefined : judgeRun(sheet).judgements.get(power.id);
  const carrier = judged === undefined ? null : carrierOf(judged);
  return (productFreqHz: number): number | null => {
    if (carrier === null) return null;
    const limit = limitDbc(sheet.ruleKey, { powerW: carrier.powerW, txFreqHz, productFreqHz });
    return limit.ok ? limit.limitDbc : null;
  };
}

/** What a sweep says about a point of its band; null where it says nothing. */
function findIn(point: TestPoint, sweep: Sweep, analysis: SweepAnalysis): Found | null {
  if (point.quantityKey === 'spurious') return findOther(sweep, analysis);
  const order = quantityOf(point.quantityKey)?.order ?? null;
  const harmonic = order === null ? undefined : analysis.harmonics.find((each) => each.order === order);
  if (harmonic === undefined) return null;
  return { meterDbc: harmonic.meterDbc, freqHz: point.freqHz, atMost: harmonic.atMost };
}

/** The strongest other product; where none stands out, none is stronger than the strongest noise. */
function findOther(sweep: Sweep, { others, fundamental }: SweepAnalysis): Found | null {
  const [worst] = others;
  if (worst !== undefined) return { meterDbc: worst.meterDbc, freqHz: worst.freqHz, atMost: false };
  const noise = strongestElsewhere(sweep, fundamental.freqHz);
  if (noise === null) return null;
  return { meterDbc: noise.level - fundamental.levelDbm, freqHz: noise.freqHz, atMost: true };
}

async function insertSweep(
  w: WriteContext,
  { runId, band, hints, instrumentRevisionId, pathRevisionId }: Input,
  { fileId, sweep, analysis }: { fileId: number; sweep: Sweep; analysis: SweepAnalysis },
): Promise<number> {
  const { understood, notes } = sweep;
  const [{ insertId }] = await w.tx.insert(sweeps).values({
    testRunId: runId,
    fileId,
    band,
    understood: {
      ...{ understood, notes, hints, analysis, instrumentRevisionId, pathRevisionId },
      trace: thinTrace(sweep, analysis.fundamental.levelDbm, drawnPoints),
    },
    createdAt: w.now,
    byUserId: actingUserId(w),
  });
  return insertId;
}
