import { describe, expect, it } from 'vitest';
import type { InstrumentSpec } from '~/domain/bench/types';
import { benchReminders } from './reminders';
import type { BenchMatters } from './reminders';

const today = '2027-03-09';

const instrument = (number: string, dueOn: string | null) => ({
  ...{ number, name: `Meter ${number}` },
  spec: {
    ...{ grade: 'accredited', checkedAgainst: null, quantities: {}, linearityDb: null, flatnessDb: null },
    ...{ vswr: null, ownDistortionDbc: null, detector: null },
    calibration:
      dueOn === null
        ? null
        : {
            ...{ expanded: 0.1, unit: 'dB', k: 2, dueOn },
            ...{ calibratedOn: null, laboratory: null, certificateNumber: null },
          },
  } satisfies InstrumentSpec as InstrumentSpec,
});

const reference = (number: string, isGood: boolean) => ({
  ...{ number, name: 'Kept rig' },
  newest: { id: 1, day: '2027-03-08', isGood, explained: false, deviation: '+0.5 dB' },
});

const matters: BenchMatters = {
  instruments: [
    instrument('LATE', '2027-03-08'),
    instrument('FAR', '2028-01-01'),
    instrument('NONE', null),
    instrument('SOON', '2027-04-08'),
    instrument('TODAY', '2027-03-09'),
  ],
  checks: { bad: [reference('R-1', false)], missingToday: [reference('R-1', false), reference('R-2', true)] },
  flags: [{ serial: 'H3-0147', runNo: 2, number: 'R-1', deviation: '+0.5 dB' }],
};
const whats = (roles: Parameters<typeof benchReminders>[1]) =>
  benchReminders(matters, roles, today).map(({ what }) => what);

describe('what the bench reminds of', () => {
  it('is shown to the owner, most urgent first', () => {
    expect(whats(['owner'])).toEqual([
      'Explain the check of R-1',
      'Look at run 2 of H3-0147',
      'Have LATE calibrated',
      'Have TODAY calibrated',
      'Have SOON calibrated',
      'Measure R-1',
      'Measure R-2',
    ]);
  });

  it('is shown to a tester without the flags, which only the owner ends', () => {
    expect(whats(['tester'])).not.toContain('Look at run 2 of H3-0147');
    expect(whats(['tester'])).toHaveLength(6);
  });

  it.each([['builder'], ['shipper'], ['bookkeeper']] as const)('is not shown to a %s', (role) => {
    expect(whats([role])).toEqual([]);
  });

  it('says the day, and what is past it', () => {
    const [late] = benchReminders(
      { ...matters, flags: [], checks: { bad: [], missingToday: [] } },
      ['tester'],
      today,
    );
    expect(late).toEqual({
      what: 'Have LATE calibrated',
      about: 'Meter LATE, overdue since 8 March 2027',
      href: '/works/instruments/LATE',
      isUrgent: true,
    });
  });
});
