import { pointLabel } from '~/domain/bench/judge-run';
import { newestReading, readCell } from '~/domain/bench/run-entry';
import type { ReadingEntry } from '~/schemas/bench-runs';
import { DomainError } from '~/server/errors';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import type { StoredReading } from '~/server/queries/bench/read-run-sheet';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { mustBeInUse } from './equipment-in-use';
import { lockOwnRun } from './lock-run';
import { putReading } from './put-reading';

/**
 * Records what was typed into a cell of an open run. Retyping corrects the newest reading, with both values in
 * the ledger of changes; `again` adds one, and all of them count.
 *
 * @param input.source `wire` where a script sent it
 * @param input.version of the reading that the person saw, 0 for an empty cell; undefined is not checked
 * @throws DomainError `refused` with field `text` where the entry cannot be read or is asked about (field
 * `confirmed`), `conflict` where the run is closed or another window was quicker, `taken`, `not_found`
 */
export async function recordReading(
  input: ReadingEntry & { runId: number; source?: 'typed' | 'wire' },
  ctx: Ctx,
): Promise<{ readingId: number; readingNo: number; version: number }> {
  return write(ctx, async (w) => {
    const run = await lockOwnRun(w, input.runId);
    const sheet = await readRunSheet(w.tx, run.row.id);
    const point = sheet.points.find(({ id }) => id === input.testPointId);
    if (point === undefined)
      throw new DomainError('not_found', 'The test plan of this unit has no such point.');
    const { instrument, path } = await mustBeInUse(w, input);
    refuseStale(newestReading(sheet.readings, point.id), input, pointLabel(point));
    const read = readCell(
      point,
      { ...input, path, detector: instrument?.detector ?? null },
      { readings: sheet.readings, ratedPowerW: run.ratedPowerW, loadOhm: run.loadOhm },
    );
    if (!read.ok) {
      throw new DomainError('refused', read.reason, {
        text: read.reason,
        ...(read.ask ? { confirmed: read.reason } : {}),
      });
    }
    const { from, ...put } = await putReading(w, run.row, point, sheet.readings, {
      again: input.again,
      enteredText: input.text,
      enteredUnit: read.enteredUnit,
      value: read.value,
      freqHz: read.freqHz,
      atMost: false,
      attenuationHeld: input.attenuationHeld,
      source: input.source ?? 'typed',
      sweepId: null,
      instrumentRevisionId: input.instrumentRevisionId,
      pathRevisionId: input.pathRevisionId,
    });
    await w.record({
      action: from === null ? 'reading.record' : 'reading.correct',
      subjects: [
        { type: 'run', id: run.row.id },
        { type: 'unit', id: run.row.unitId },
      ],
      details: {
        point: pointLabel(point),
        readingNo: put.readingNo,
        from,
        to: { text: input.text, unit: read.enteredUnit, value: read.value },
      },
    });
    return put;
  });
}

/** Two windows cannot overwrite each other: the later one is told what the other entered. */
function refuseStale(
  stands: StoredReading | undefined,
  input: Pick<ReadingEntry, 'version' | 'again'>,
  label: string,
): void {
  if (input.version === undefined || input.version === (stands?.version ?? 0)) return;
  const sentence =
    stands === undefined
      ? `${label} was voided meanwhile. Look again.`
      : `Another window has entered “${stands.enteredText}” (${stands.enteredUnit}) at ${label} meanwhile. Yours was not taken.`;
  throw new DomainError('conflict', sentence, { text: sentence });
}
