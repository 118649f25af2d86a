import { invariant } from './invariant';

/** A calendar day as `YYYY-MM-DD`, without a time or a zone. */
export type Day = string;

const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
] as const;
const DAY_MS = 86_400_000;

function utcOf(day: Day): Date {
  invariant(/^\d{4}-\d{2}-\d{2}$/.test(day), `"${day}" is a day as YYYY-MM-DD`);
  const date = new Date(`${day}T00:00:00Z`);
  invariant(
    !Number.isNaN(date.getTime()) && date.toISOString().startsWith(day),
    `"${day}" is a day of the calendar`,
  );
  return date;
}

/** Whether a text is a day of the calendar, as `2027-03-09`. */
export function isDay(text: string): boolean {
  if (!/^\d{4}-\d{2}-\d{2}$/.test(text)) return false;
  const date = new Date(`${text}T00:00:00Z`);
  return !Number.isNaN(date.getTime()) && date.toISOString().startsWith(text);
}

/** `2027-03-09` as `9 March 2027`. */
export function formatDay(day: Day): string {
  const date = utcOf(day);
  return `${date.getUTCDate()} ${MONTHS[date.getUTCMonth()]} ${date.getUTCFullYear()}`;
}

/** The calendar day on which an instant falls in a zone (IANA name, such as `Europe/Lisbon`). */
export function dayOf(instant: Date, timeZone: string): Day {
  const parts = partsOf(instant, timeZone);
  return `${parts.year}-${parts.month}-${parts.day}`;
}

/** An instant as `9 March 2027`, by the calendar of a zone. */
export function formatDayOf(instant: Date, timeZone: string): string {
  return formatDay(dayOf(instant, timeZone));
}

/** An instant as `9 March 2027, 14:10 CET`: the zone is always named. */
export function formatTimeOf(instant: Date, timeZone: string): string {
  const parts = partsOf(instant, timeZone);
  return `${formatDayOf(instant, timeZone)}, ${parts.hour}:${parts.minute} ${parts.zone}`;
}

/** The day a number of days later (earlier, if negative). */
export function addDays(day: Day, days: number): Day {
  return new Date(utcOf(day).getTime() + days * DAY_MS).toISOString().slice(0, 10);
}

/** Week, weekday (1 is Monday) and the year the week belongs to, by ISO 8601. */
export function isoWeekOf(day: Day): { weekYear: number; week: number; weekday: number } {
  const date = utcOf(day);
  const weekday = date.getUTCDay() || 7;
  // A week belongs to the year of its Thursday.
  const thursday = new Date(date.getTime() + (4 - weekday) * DAY_MS);
  const weekYear = thursday.getUTCFullYear();
  const dayOfYear = Math.round((thursday.getTime() - Date.UTC(weekYear, 0, 1)) / DAY_MS);
  return { weekYear, week: Math.floor(dayOfYear / 7) + 1, weekday };
}

/** The date code YYWW. The year is the one the week belongs to, which near New Year is not the calendar's. */
export function weekCodeOf(day: Day): string {
  const { weekYear, week } = isoWeekOf(day);
  return `${pad(weekYear % 100)}${pad(week)}`;
}

function pad(n: number): string {
  return String(n).padStart(2, '0');
}

function partsOf(instant: Date, timeZone: string) {
  const found = new Map(
    new Intl.DateTimeFormat('en-GB', {
      timeZone,
      year: 'numeric',
      month: '2-digit',
      day: '2-digit',
      hour: '2-digit',
      minute: '2-digit',
      hourCycle: 'h23',
      timeZoneName: 'short',
    })
      .formatToParts(instant)
      .map((part) => [part.type, part.value]),
  );
  const get = (type: Intl.DateTimeFormatPartTypes) => found.get(type) ?? '';
  return {
    year: get('year').padStart(4, '0'),
    month: get('month'),
    day: get('day'),
    hour: get('hour'),
    minute: get('minute'),
    zone: get('timeZoneName'),
  };
}
