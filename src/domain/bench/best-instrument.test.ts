import { expect, it } from 'vitest';
import { bestInstrument } from './best-instrument';
import { knownQuantity } from './quantities';
import type { InstrumentSpec } from './types';

const today = '2027-03-09';

function instrument(name: string, changes: Partial<InstrumentSpec>): { name: string; spec: InstrumentSpec } {
  return {
    name,
    spec: {
      ...{ grade: 'accredited', checkedAgainst: null, quantities: {}, linearityDb: null, flatnessDb: null },
      ...{ vswr: null, ownDistortionDbc: null, detector: null, calibration: null },
      ...changes,
    },
  };
}

const power = { rf_power: { accuracy: [], resolution: null } };
const due = (dueOn: string) => ({
  expanded: 0.1,
  unit: 'dB' as const,
  k: 2,
  calibratedOn: null,
  dueOn,
  laboratory: null,
  certificateNumber: null,
});
const pocket = instrument('pocket', { grade: 'unchecked', quantities: power });
const overdue = instrument('overdue', { quantities: power, linearityDb: 1, calibration: due('2027-03-08') });
const good = instrument('good', { quantities: power, linearityDb: 0.3, calibration: due(today) });
const compared = instrument('compared', { grade: 'checked', quantities: power });

it.each([
  ['in calibration before overdue', [overdue, good], 'rf_power', 'good'],
  ['an unchecked one before an overdue one', [overdue, pocket], 'rf_power', 'pocket'],
  ['by grade', [pocket, compared, good], 'rf_power', 'good'],
  ['a ratio only with a stated linearity', [pocket, overdue], 'harmonic_2', 'overdue'],
  ['none where none reads it', [pocket, good], 'current_rest', undefined],
] as const)('takes %s', (_, instruments, quantityKey, name) => {
  expect(bestInstrument(instruments, knownQuantity(quantityKey), today)?.name).toBe(name);
});
