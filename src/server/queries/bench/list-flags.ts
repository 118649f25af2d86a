import { asc, desc, eq, isNull } from 'drizzle-orm';
import { deviationText } from '~/domain/bench/daily-check';
import type { Reader } from '~/server/db/client';
import { checkReferences, dailyChecks, runFlags, testRuns, units, userProfiles } from '~/server/db/schema';
import { listQuantities } from './list-quantities';
import { referenceOf } from './read-check-state';

export interface Flag {
  id: number;
  serial: string;
  runNo: number;
  /** Of the reference whose check was bad. */
  number: string;
  name: string;
  checkedAt: Date;
  deviation: string;
  /** Why the check was bad, where somebody has said so. */
  explanation: string | null;
  endedAt: Date | null;
  endedBy: string | null;
  note: string | null;
}

/** The doubts that are open, oldest first. */
export function listOpenFlags(reader: Reader): Promise<Flag[]> {
  return listFlags(reader, 'open');
}

/** The doubts on one run, open or ended, newest first. */
export function listFlagsOfRun(reader: Reader, testRunId: number): Promise<Flag[]> {
  return listFlags(reader, testRunId);
}

async function listFlags(reader: Reader, which: 'open' | number): Promise<Flag[]> {
  const isOpen = which === 'open';
  const [rows, book] = await Promise.all([
    reader
      .select({
        flag: runFlags,
        serial: units.serial,
        runNo: testRuns.runNo,
        check: dailyChecks,
        reference: checkReferences,
        endedBy: userProfiles.name,
      })
      .from(runFlags)
      .innerJoin(testRuns, eq(testRuns.id, runFlags.testRunId))
      .innerJoin(units, eq(units.id, testRuns.unitId))
      .innerJoin(dailyChecks, eq(dailyChecks.id, runFlags.dailyCheckId))
      .innerJoin(checkReferences, eq(checkReferences.id, dailyChecks.checkReferenceId))
      .leftJoin(userProfiles, eq(userProfiles.userId, runFlags.endedBy))
      .where(isOpen ? isNull(runFlags.endedAt) : eq(runFlags.testRunId, which))
      .orderBy(isOpen ? asc(runFlags.id) : desc(runFlags.id)),
    listQuantities(reader),
  ]);
  return rows.map(({ flag, check, reference, ...row }) => ({
    ...row,
    ...{ id: flag.id, number: reference.number, name: reference.name, checkedAt: check.at },
    deviation: deviationText(referenceOf(reference, book), check.deviation),
    explanation: check.explanation,
    ...{ endedAt: flag.endedAt, note: flag.note },
  }));
}
