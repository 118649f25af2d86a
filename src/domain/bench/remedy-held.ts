/** A point of a test plan, over its revisions. */
export interface PointKey {
  quantityKey: string;
  band: string | null;
}

/** A closed run after a rework. */
export interface LaterRun {
  openedAt: Date;
  /** Points that failed in it. */
  failed: readonly PointKey[];
}

/**
 * Whether a run that passed shows that a rework's remedy held: no run between the two failed again at a point for
 * which the unit was in rework. Where the rework names no points, none may have failed at all.
 *
 * @param seen the points that had sent the unit into rework
 * @param between closed runs of the unit before the one that passed
 */
export function remedyHeld(
  rework: { closedAt: Date; seen: readonly PointKey[] },
  between: readonly LaterRun[],
): boolean {
  return between
    .filter(({ openedAt }) => openedAt >= rework.closedAt)
    .every(({ failed }) =>
      failed.every(
        (point) =>
          rework.seen.length > 0 &&
          !rework.seen.some(
            ({ quantityKey, band }) => quantityKey === point.quantityKey && band === point.band,
          ),
      ),
    );
}
