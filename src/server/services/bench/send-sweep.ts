import { judgeRun, pointLabel } from '~/domain/bench/judge-run';
import type { RecordedSweep, WireSweep } from '~/schemas/bench-wire';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { equipmentByNumber } from './equipment-by-number';
import { findOpenRun } from './find-open-run';
import { readSweepIntoRun } from './read-sweep-into-run';

type Loading = Omit<
  Parameters<typeof readSweepIntoRun>[0],
  'runId' | 'instrumentRevisionId' | 'pathRevisionId'
>;

/**
 * Reads a sweep that a script has sent into the open run of a unit that the script's person has.
 *
 * @returns what was read, and the judgement of every point on the band
 * @throws DomainError as {@link readSweepIntoRun}; `not_found` or `conflict` at field `serial`, `refused` at
 * `instrument` or `path`
 */
export async function sendSweep(input: Loading & WireSweep, ctx: Ctx): Promise<RecordedSweep> {
  const { serial, instrument, path, ...loading } = input;
  return write(ctx, async (w) => {
    const run = await findOpenRun(w, serial);
    const equipment = await equipmentByNumber(w, { instrument, path });
    const read = await readSweepIntoRun({ ...loading, ...equipment, runId: run.runId }, w);
    await w.record({
      action: 'sweep.send',
      subjects: [
        { type: 'run', id: run.runId },
        { type: 'unit', id: run.unitId },
      ],
      details: { sweepId: read.sweepId, band: read.band, readings: read.readings },
    });
    const sheet = await readRunSheet(w.tx, run.runId);
    const { judgements } = judgeRun(sheet);
    return {
      ...{ serial: run.serial, runNo: run.runNo, ...read },
      judgements: sheet.points.flatMap((point) => {
        const judgement = judgements.get(point.id);
        if (judgement === undefined || point.band !== read.band) return [];
        return [{ ...judgement, unit: point.quantity.unit, testPointId: point.id, label: pointLabel(point) }];
      }),
    };
  });
}
