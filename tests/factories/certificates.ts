import { eq } from 'drizzle-orm';
import { units } from '~/server/db/schema';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { issueCertificate } from '~/server/services/certificates/issue-certificate';
import type { SeededBench } from './bench';

/** Readings of the plan of `buildPlan` on 20 m that pass. */
export const passingReadings = {
  rf_power: '-6.03 dBm',
  harmonic_2: '51.1',
  harmonic_3: '61.6',
  current_key_down: '612 mA',
  frequency_error: '38',
};

/** A new run of the bench's unit with its readings, not closed yet. */
export async function fillRun(
  bench: SeededBench,
  change: Partial<typeof passingReadings> = {},
): Promise<number> {
  const { runId } = await openRun({ serial: bench.serial }, bench.ctx);
  for (const [key, text] of Object.entries({ ...passingReadings, ...change })) {
    await recordReading(
      {
        ...{ runId, testPointId: bench.pointId(key), text },
        ...{ again: false, confirmed: false, attenuationHeld: false },
        ...{ instrumentRevisionId: bench.instrumentRevisionId, pathRevisionId: bench.pathRevisionId },
      },
      bench.ctx,
    );
  }
  return runId;
}

/** A run of the bench's unit that passes, closed and certified. */
export async function issueFor(bench: SeededBench) {
  const runId = await fillRun(bench);
  await closeRun({ runId }, bench.ctx);
  const issued = await issueCertificate({ runId }, bench.ctx);
  const [unit] = await bench.ctx.db
    .select({ id: units.id })
    .from(units)
    .where(eq(units.serial, bench.serial));
  if (unit === undefined) throw new Error('The unit is gone.');
  return { runId, unitId: unit.id, ...issued };
}
