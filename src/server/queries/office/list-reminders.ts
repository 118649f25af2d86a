import { benchReminders } from '~/domain/people/reminders';
import type { Reminder } from '~/domain/people/reminders';
import type { StaffRole } from '~/domain/people/roles';
import { dayOf } from '~/lib/dates';
import type { Reader } from '~/server/db/client';
import { listInstruments } from '~/server/queries/bench/list-equipment';
import { listOpenFlags } from '~/server/queries/bench/list-flags';
import { readCheckState } from '~/server/queries/bench/read-check-state';

/** What a person of these roles is reminded of besides the units that wait, most urgent first. */
export async function listReminders(
  reader: Reader,
  roles: readonly StaffRole[],
  { now, timeZone }: { now: Date; timeZone: string },
): Promise<Reminder[]> {
  if (!roles.includes('owner') && !roles.includes('tester')) return [];
  const [instruments, checks, flags] = await Promise.all([
    listInstruments(reader),
    readCheckState(reader, now),
    roles.includes('owner') ? listOpenFlags(reader) : [],
  ]);
  return benchReminders({ instruments, checks, flags }, roles, dayOf(now, timeZone));
}
