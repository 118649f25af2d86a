import type { PointJudgement } from '~/domain/bench/judge-point';
import { judgeStation, readEntry, withEntry } from './run-sheet';
import type { Entry, Equipment, Point } from './run-sheet';
import type { Station } from '~/schemas/bench-station';

/** What a scratch reading would come to. */
type Scratch =
  { ok: true; text: string; judgement: PointJudgement } | { ok: false; reason: string; ask: boolean };

/**
 * Reads and judges a reading that belongs to no run: on a copy of the sheet in which it is the only one of its point.
 * The station is left as it is.
 */
export function scratchReading(
  station: Station,
  equipment: Equipment,
  point: Point,
  entry: Pick<Entry, 'text' | 'columnUnit' | 'instrumentRevisionId' | 'pathRevisionId' | 'confirmed'>,
): Scratch {
  const readings = station.sheet.readings.filter(({ testPointId }) => testPointId !== point.id);
  // What a closed run kept stays with the run: here it is computed anew.
  const copy: Station = { ...station, kept: [], sheet: { ...station.sheet, readings } };
  const whole: Entry = { ...entry, testPointId: point.id, again: true, attenuationHeld: false, version: 0 };
  const read = readEntry(copy, equipment, point, whole);
  if (!read.ok) return read;
  const judgement = judgeStation(withEntry(copy, equipment, whole)).judgements.get(point.id);
  if (judgement === undefined)
    return { ok: false, reason: 'This point is not in the test plan.', ask: false };
  return { ok: true, text: entry.text, judgement };
}
