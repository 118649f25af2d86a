/** Base unit of an accepted entry; prefixes are understood by the entry reader. */
export type EntryUnit = 'dBm' | 'W' | 'Vrms' | 'Vpk' | 'Vpp' | 'Vdc' | 'dBc' | 'A' | 'Hz' | 'yes/no';

/** A quantity is a row here, not a screen of its own. */
export interface Quantity {
  key: string;
  label: string;
  /** Unit of values and limits inside. */
  unit: 'W' | 'dBc' | 'A' | 'Hz' | '';
  entryUnits: readonly EntryUnit[];
  /** Taken where neither the entry nor the column says a unit; null where that would be a guess. */
  defaultUnit: string | null;
  format: 'power' | 'ratio' | 'current' | 'frequency_error' | 'yes_no';
  /** Whether what the meter shows is corrected by the path. */
  pathApplies: boolean;
  /** Which way is better: `upper` has a maximum, `lower` a minimum, `both` a window. */
  limitSense: 'lower' | 'upper' | 'both';
  /** Harmonic order, for harmonics only. */
  order: number | null;
}

const POWER_UNITS: readonly EntryUnit[] = ['dBm', 'W', 'Vrms', 'Vpk', 'Vpp', 'Vdc'];
const RATIO_UNITS: readonly EntryUnit[] = ['dBc', 'dBm'];

function ordinal(order: number): string {
  if (order === 2) return '2nd';
  return order === 3 ? '3rd' : `${String(order)}th`;
}

function ratio(key: string, label: string, order: number | null): Quantity {
  return {
    key,
    label,
    unit: 'dBc',
    entryUnits: RATIO_UNITS,
    defaultUnit: 'dBc',
    format: 'ratio',
    pathApplies: true,
    limitSense: 'upper',
    order,
  };
}

function current(key: string, label: string): Quantity {
  return {
    key,
    label,
    unit: 'A',
    entryUnits: ['A'],
    defaultUnit: null,
    format: 'current',
    pathApplies: false,
    limitSense: 'upper',
    order: null,
  };
}

/** Highest harmonic order that is looked for. */
export const MAX_HARMONIC = 10;

/** Every quantity the bench knows, in the order in which it is tested. */
export const QUANTITIES: readonly Quantity[] = [
  {
    key: 'rf_power',
    label: 'Power',
    unit: 'W',
    entryUnits: POWER_UNITS,
    defaultUnit: null,
    format: 'power',
    pathApplies: true,
    limitSense: 'lower',
    order: null,
  },
  ...Array.from({ length: MAX_HARMONIC - 1 }, (_, index) =>
    ratio(`harmonic_${String(index + 2)}`, `${ordinal(index + 2)} harmonic`, index + 2),
  ),
  ratio('spurious', 'Spurious', null),
  current('current_rest', 'Current, at rest'),
  current('current_key_down', 'Current, key down'),
  {
    key: 'frequency_error',
    label: 'Frequency error',
    unit: 'Hz',
    entryUnits: ['Hz'],
    defaultUnit: 'Hz',
    format: 'frequency_error',
    pathApplies: false,
    limitSense: 'both',
    order: null,
  },
  {
    key: 'check',
    label: 'Check',
    unit: '',
    entryUnits: ['yes/no'],
    defaultUnit: 'yes/no',
    format: 'yes_no',
    pathApplies: false,
    limitSense: 'lower',
    order: null,
  },
];

const BY_KEY = new Map(QUANTITIES.map((quantity) => [quantity.key, quantity]));

/** The quantity of a key; undefined for a key that is not in the table. */
export function quantityOf(key: string): Quantity | undefined {
  return BY_KEY.get(key);
}
