import { desc, eq } from 'drizzle-orm';
import { normaliseScan } from '~/lib/serials';
import { testRuns, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { WriteContext } from '~/server/write';

/**
 * The open run of a unit, as a script asks for it: by the serial number. Whose run it is, is for the caller's lock.
 *
 * @throws DomainError `not_found`; `conflict` where no run is open
 */
export async function findOpenRun(
  w: WriteContext,
  serial: string,
): Promise<{ runId: number; runNo: number; serial: string; unitId: number }> {
  const [found] = await w.tx
    .select({ unitId: units.id, serial: units.serial, run: testRuns })
    .from(units)
    .leftJoin(testRuns, eq(testRuns.unitId, units.id))
    .where(eq(units.serial, normaliseScan(serial)))
    .orderBy(desc(testRuns.runNo))
    .limit(1);
  if (found === undefined) {
    throw new DomainError('not_found', `There is no unit ${serial}.`, {
      serial: `There is no unit ${serial}.`,
    });
  }
  const { unitId, run } = found;
  if (run === null) {
    const sentence = `${found.serial} has no run open. Open one at the bench first.`;
    throw new DomainError('conflict', sentence, { serial: sentence });
  }
  if (run.state === 'closed') {
    const sentence = `Run ${run.runNo} of ${found.serial} is closed, and closed is closed. Open a new run.`;
    throw new DomainError('conflict', sentence, { serial: sentence });
  }
  return { runId: run.id, runNo: run.runNo, serial: found.serial, unitId };
}
