import type { Quantity } from './quantities';
import type { InstrumentSpec } from './types';

const gradeRank = { accredited: 0, checked: 1, unchecked: 2 } as const;
const overdueRank = 3;

/**
 * The instrument that a quantity is read with unless the tester chooses another: one in calibration before one
 * that is overdue, then by grade, then as they are listed. A ratio needs a stated linearity.
 *
 * @param testedOn day of the run, `YYYY-MM-DD`
 * @returns undefined where none reads the quantity
 */
export function bestInstrument<T extends { spec: InstrumentSpec }>(
  instruments: readonly T[],
  quantity: Quantity,
  testedOn: string,
): T | undefined {
  const isRatio = quantity.unit === 'dBc';
  const fits = instruments.filter(({ spec }) =>
    isRatio ? spec.linearityDb !== null : spec.quantities[quantity.key] !== undefined,
  );
  const rankOf = ({ spec }: T): number =>
    gradeRank[spec.grade] +
    (spec.calibration !== null && spec.calibration.dueOn < testedOn ? overdueRank : 0);
  return [...fits].sort((a, b) => rankOf(a) - rankOf(b))[0];
}
