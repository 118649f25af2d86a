import { formatDay, formatDayOf, formatTimeOf } from '~/lib/dates';

type Props =
  /** A calendar day, `YYYY-MM-DD`. */
  | { day: string }
  /** An instant, in the zone of whoever reads; the time only with `time`, and then its zone is named. */
  | { at: Date | string; zone: string; time?: boolean | undefined };

/** A day as 9 March 2027, an instant as 9 March 2027, 14:10 CET. */
export function DateText(props: Props) {
  if ('day' in props) return <time dateTime={props.day}>{formatDay(props.day)}</time>;
  const at = new Date(props.at);
  const text = props.time ? formatTimeOf(at, props.zone) : formatDayOf(at, props.zone);
  return (
    <time dateTime={at.toISOString()} className="whitespace-nowrap">
      {text}
    </time>
  );
}
