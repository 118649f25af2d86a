const dayMs = 24 * 3600_000;

/** Moments and days around the moment at which the demo is made. */
export interface Calendar {
  now: Date;
  /** So many days after (before, where negative) today, at an hour of the day, UTC; never after now. */
  at(day: number, hour: number): Date;
  /** ISO date so many days from today. */
  day(offset: number): string;
}

/** A calendar around `now`. Hours may have a fraction. */
export function calendarAround(now: Date): Calendar {
  const midnight = Math.floor(now.getTime() / dayMs) * dayMs;
  return {
    now,
    at: (day, hour) =>
      new Date(Math.min(now.getTime(), Math.round(midnight + day * dayMs + hour * 3600_000))),
    day: (offset) => new Date(midnight + offset * dayMs).toISOString().slice(0, 10),
  };
}
