import { calibrationState } from '~/domain/bench/calibration';
import type { CheckState } from '~/domain/bench/daily-check';
import type { InstrumentSpec } from '~/domain/bench/types';
import { formatDay } from '~/lib/dates';
import { paths } from '~/lib/paths';
import type { StaffRole } from './roles';

/** Something of the bench that waits, besides the units. */
export interface Reminder {
  what: string;
  about: string;
  href: string;
  /** Something stands still, or is past its day. */
  isUrgent: boolean;
}

/** What the bench's reminders are made from. */
export interface BenchMatters {
  /** Instruments in use. */
  instruments: readonly { number: string; name: string; spec: InstrumentSpec }[];
  checks: CheckState;
  /** Runs that a bad check casts doubt on, until the owner has looked. */
  flags: readonly { serial: string; runNo: number; number: string; deviation: string }[];
}

/** What a person of these roles is reminded of, most urgent first. @param today ISO day */
export function benchReminders(
  { instruments, checks, flags }: BenchMatters,
  roles: readonly StaffRole[],
  today: string,
): Reminder[] {
  const isOwner = roles.includes('owner');
  if (!isOwner && !roles.includes('tester')) return [];
  const due = instruments
    .flatMap(({ number, name, spec }) => {
      const state = calibrationState(spec, today);
      const dueOn = spec.calibration?.dueOn ?? '';
      return state === 'overdue' || state === 'due_soon' ? [{ number, name, state, dueOn }] : [];
    })
    .sort((a, b) => a.dueOn.localeCompare(b.dueOn));
  return [
    ...checks.bad.map(({ number, name, newest }) => ({
      what: `Explain the check of ${number}`,
      about: `${name} was off by ${newest?.deviation ?? ''}: no run can be closed`,
      href: paths.checks(),
      isUrgent: true,
    })),
    ...(isOwner ? flags : []).map(({ serial, runNo, number, deviation }) => ({
      what: `Look at run ${runNo} of ${serial}`,
      about: `closed before ${number} was found off by ${deviation}`,
      href: paths.run(serial, runNo),
      isUrgent: true,
    })),
    ...due.map(({ number, name, state, dueOn }) => ({
      what: `Have ${number} calibrated`,
      about: `${name}, ${state === 'overdue' ? 'overdue since' : 'due on'} ${formatDay(dueOn)}`,
      href: paths.instrument(number),
      isUrgent: state === 'overdue',
    })),
    ...checks.missingToday.map(({ number, name }) => ({
      what: `Measure ${number}`,
      about: `${name}, not checked today`,
      href: paths.checks(),
      isUrgent: false,
    })),
  ];
}
