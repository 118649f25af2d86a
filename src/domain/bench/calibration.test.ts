import { expect, it } from 'vitest';
import { calibrationState } from './calibration';

it.each([
  ['2027-03-08', 'overdue'],
  ['2027-03-09', 'due_soon'],
  ['2027-04-08', 'due_soon'],
  ['2027-04-09', 'good'],
])('a calibration due on %s is %s on 9 March 2027', (dueOn, state) => {
  const calibration = {
    ...{ expanded: 0.1, unit: 'dB' as const, k: 2, dueOn },
    ...{ calibratedOn: null, laboratory: null, certificateNumber: null },
  };
  expect(calibrationState({ calibration }, '2027-03-09')).toBe(state);
  expect(calibrationState({ calibration: null }, '2027-03-09')).toBe('none');
});
