import { addDays, dayOf, formatDay } from '~/lib/dates';
import type { FoundUnit } from '~/server/queries/production/find-unit';

/** The quiet lines of a unit's tag: what it is built to, for whom, and how many days are in hand. */
export function tagLines(
  unit: Pick<
    FoundUnit,
    | 'bomLetter'
    | 'firmwareVersion'
    | 'batchNumber'
    | 'orderNumber'
    | 'callSign'
    | 'promisedOn'
    | 'estimatedOn'
    | 'stage'
  >,
  { callSign, timeZone, now }: { callSign: boolean; timeZone: string; now: Date },
): string[] {
  const due = unit.promisedOn ?? unit.estimatedOn;
  const built = [
    unit.bomLetter === null ? null : `BOM ${unit.bomLetter}`,
    unit.firmwareVersion === null ? null : `firmware ${unit.firmwareVersion}`,
    unit.batchNumber !== null
      ? `batch ${unit.batchNumber}`
      : unit.bomLetter === null
        ? 'entered at the bench'
        : 'built ahead',
  ];
  const forWhom = [
    unit.orderNumber === null ? 'for no order yet' : `order ${unit.orderNumber}`,
    callSign ? unit.callSign : null,
    due === null || unit.stage === 'gone' ? null : dueText(due, dayOf(now, timeZone)),
  ];
  return [joined(built, ' · '), joined(forWhom, ', ')];
}

function joined(texts: readonly (string | null)[], by: string): string {
  return texts.filter((text) => text !== null).join(by);
}

function dueText(due: string, today: string): string {
  const days = daysBetween(today, due);
  const hand = days < 0 ? `${-days} days late` : days === 0 ? 'due today' : `${days} days in hand`;
  return `by ${formatDay(due)}, ${hand.replace(/^1 days/, 'one day')}`;
}

/** Whole days from one day to another; negative where the other lies before. */
export function daysBetween(from: string, to: string): number {
  const at = (day: string) => Date.parse(`${addDays(day, 0)}T00:00:00Z`);
  return Math.round((at(to) - at(from)) / 86_400_000);
}
