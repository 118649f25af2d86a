/** What the bench does next with a unit at its final test. */
export type BenchTask = 'hold' | 'rework' | 'go_on' | 'open';

/** A run that is open is gone on with, whatever else is; otherwise a hold and a rework come before a new run. */
export function benchTask(unit: {
  onHold: boolean;
  inRework: boolean;
  newestRun: { state: 'open' | 'closed' } | null;
}): BenchTask {
  if (unit.newestRun?.state === 'open') return 'go_on';
  if (unit.onHold) return 'hold';
  return unit.inRework ? 'rework' : 'open';
}
