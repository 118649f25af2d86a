import { addDays } from '~/lib/dates';
import type { InstrumentSpec } from './types';

export type CalibrationState = 'none' | 'good' | 'due_soon' | 'overdue';

/** So many days before a calibration is due, it is reminded of. */
export const REMINDED_DAYS = 30;

/** How a calibration stands. On the day it is due it still holds. @param today ISO day */
export function calibrationState(
  { calibration }: Pick<InstrumentSpec, 'calibration'>,
  today: string,
): CalibrationState {
  if (calibration === null) return 'none';
  if (calibration.dueOn < today) return 'overdue';
  return calibration.dueOn <= addDays(today, REMINDED_DAYS) ? 'due_soon' : 'good';
}
