/** Unit of values, limits and formulas inside; `1` is a plain number, an empty one a yes or no. */
export type QuantityUnit = 'W' | 'dBc' | 'dBm' | 'dB' | 'A' | 'V' | 'Hz' | 's' | 'K' | '1' | '';

/** Base unit of an accepted entry; prefixes are understood by the entry reader. */
export type EntryUnit =
  | 'dBm'
  | 'W'
  | 'Vrms'
  | 'Vpk'
  | 'Vpp'
  | 'Vdc'
  | 'dBc'
  | 'dB'
  | 'A'
  | 'V'
  | 'Hz'
  | 's'
  | '°C'
  | 'K'
  | '%'
  | '1'
  | 'yes/no';

/** How a value is written; the unit inside follows from it but for a number. */
export type QuantityFormat =
  | 'power'
  | 'ratio'
  | 'level'
  | 'current'
  | 'voltage'
  | 'frequency'
  | 'frequency_error'
  | 'time'
  | 'temperature'
  | 'percent'
  | 'number'
  | 'yes_no';

/** A quantity is a row of data here, not a screen of its own. */
export interface Quantity {
  key: string;
  label: string;
  unit: QuantityUnit;
  entryUnits: readonly EntryUnit[];
  /** Taken where neither the entry nor the column says a unit; null where that would be a guess. */
  defaultUnit: string | null;
  format: QuantityFormat;
  /**
   * What a path does to what the meter or generator shows: `adds` its loss on the way to an instrument,
   * `subtracts` it on the way from a generator.
   */
  path: 'none' | 'adds' | 'subtracts';
  /** Which way is better: `upper` has a maximum, `lower` a minimum, `both` a window. */
  limitSense: 'lower' | 'upper' | 'both';
  /** Harmonic order, for harmonics only. */
  order: number | null;
  /** Computed from other quantities of its band and not read; in the units inside. */
  formula: string | null;
  /** Where its definition or formula is from. */
  source: string;
}

type Row = Partial<Quantity> & Pick<Quantity, 'key' | 'label' | 'format'>;

interface Kind {
  unit: QuantityUnit;
  entryUnits: readonly EntryUnit[];
  defaultUnit: string | null;
}

/** Unit inside and units of entry that follow from a format. */
export const QUANTITY_KINDS: Record<QuantityFormat, Kind> = {
  power: { unit: 'W', entryUnits: ['dBm', 'W', 'Vrms', 'Vpk', 'Vpp', 'Vdc'], defaultUnit: null },
  ratio: { unit: 'dBc', entryUnits: ['dBc', 'dBm'], defaultUnit: 'dBc' },
  level: { unit: 'dBm', entryUnits: ['dBm', 'Vrms'], defaultUnit: 'dBm' },
  current: { unit: 'A', entryUnits: ['A'], defaultUnit: null },
  voltage: { unit: 'V', entryUnits: ['V'], defaultUnit: 'V' },
  frequency: { unit: 'Hz', entryUnits: ['Hz'], defaultUnit: null },
  frequency_error: { unit: 'Hz', entryUnits: ['Hz'], defaultUnit: 'Hz' },
  time: { unit: 's', entryUnits: ['s'], defaultUnit: null },
  temperature: { unit: 'K', entryUnits: ['°C', 'K'], defaultUnit: '°C' },
  percent: { unit: '1', entryUnits: ['%'], defaultUnit: '%' },
  number: { unit: '1', entryUnits: ['1'], defaultUnit: '1' },
  yes_no: { unit: '', entryUnits: ['yes/no'], defaultUnit: 'yes/no' },
};

/** Fills a row in with what follows from its format. */
function quantity(row: Row): Quantity {
  return {
    ...QUANTITY_KINDS[row.format],
    path: 'none',
    limitSense: 'upper',
    order: null,
    formula: null,
    source: 'common practice',
    ...row,
  };
}

function ordinal(order: number): string {
  if (order === 2) return '2nd';
  return order === 3 ? '3rd' : `${String(order)}th`;
}

/** Highest harmonic order that is looked for. */
export const MAX_HARMONIC = 10;

/** Every quantity that ships, in the order in which it is tested. */
export const QUANTITIES: readonly Quantity[] = [
  quantity({ key: 'rf_power', label: 'Power', format: 'power', path: 'adds', limitSense: 'lower' }),
  ...Array.from({ length: MAX_HARMONIC - 1 }, (_, index) =>
    quantity({
      key: `harmonic_${String(index + 2)}`,
      label: `${ordinal(index + 2)} harmonic`,
      format: 'ratio',
      path: 'adds',
      order: index + 2,
    }),
  ),
  quantity({ key: 'spurious', label: 'Spurious', format: 'ratio', path: 'adds' }),
  quantity({
    key: 'power_after_minute',
    label: 'Power after a minute',
    format: 'power',
    path: 'adds',
    limitSense: 'lower',
  }),
  quantity({
    key: 'power_drop',
    label: 'Power drop in a minute',
    format: 'level',
    unit: 'dB',
    entryUnits: ['dB'],
    defaultUnit: 'dB',
    formula: '10 * lg(rf_power / power_after_minute)',
    source: 'ratio of two powers in dB',
  }),
  quantity({ key: 'current_rest', label: 'Current, at rest', format: 'current' }),
  quantity({ key: 'current_key_down', label: 'Current, key down', format: 'current' }),
  quantity({ key: 'current_no_drive', label: 'Current, transmitting without drive', format: 'current' }),
  quantity({ key: 'supply_voltage', label: 'Supply voltage', format: 'voltage', limitSense: 'both' }),
  quantity({
    key: 'efficiency',
    label: 'Efficiency',
    format: 'percent',
    limitSense: 'lower',
    formula: 'rf_power / (supply_voltage * current_key_down)',
    source: 'P / (V·I)',
  }),
  quantity({
    key: 'dissipation',
    label: 'Heat in the output stage',
    format: 'power',
    formula: 'supply_voltage * (current_key_down - current_no_drive) - rf_power',
    source: 'V·(I key down − I without drive) − P',
  }),
  quantity({
    key: 'dissipation_per_device',
    label: 'Heat in each output device',
    format: 'power',
    formula: '(supply_voltage * (current_key_down - current_no_drive) - rf_power) / devices',
    source: 'V·(I key down − I without drive) − P, by the number of devices',
  }),
  quantity({
    key: 'junction_temperature',
    label: 'Junction temperature',
    format: 'temperature',
    formula:
      'ambient + duty * theta * (supply_voltage * (current_key_down - current_no_drive) - rf_power) / devices',
    source: 'Tj = Ta + duty·P·θ, as in the data sheets of power transistors',
  }),
  quantity({
    key: 'frequency_error',
    label: 'Frequency error',
    format: 'frequency_error',
    limitSense: 'both',
  }),
  quantity({
    key: 'receive_offset',
    label: 'Receive offset',
    format: 'frequency_error',
    limitSense: 'both',
    source: 'common practice: about 600 to 800 Hz for CW',
  }),
  quantity({ key: 'sensitivity', label: 'Sensitivity', format: 'level', path: 'subtracts' }),
  quantity({ key: 'keying_rise', label: 'Keying, rise', format: 'time', limitSense: 'both' }),
  quantity({ key: 'keying_fall', label: 'Keying, fall', format: 'time', limitSense: 'both' }),
  quantity({ key: 'case_temperature', label: 'Case temperature after key-down', format: 'temperature' }),
  quantity({ key: 'check', label: 'Check', format: 'yes_no', limitSense: 'lower' }),
];

/** What a formula may name besides quantities: facts of the run and of the output stage, in the units inside. */
export const FORMULA_CONSTANTS = ['devices', 'theta', 'duty', 'ambient'] as const;

/** Quantities by key, those that ship and a works' own. */
export type QuantityBook = ReadonlyMap<string, Quantity>;

/** A book of the quantities that ship and a works' own, which come after and may not take a key that ships. */
export function quantityBook(own: readonly Quantity[] = []): QuantityBook {
  return new Map([...own, ...QUANTITIES].map((each) => [each.key, each]));
}

const SHIPPED = quantityBook();

/** The shipped quantity of a key; undefined for any other key. */
export function shippedQuantity(key: string): Quantity | undefined {
  return SHIPPED.get(key);
}

/** The shipped quantity of a key that is written in code. @throws Error for a key that does not ship */
export function knownQuantity(key: string): Quantity {
  const found = SHIPPED.get(key);
  if (found === undefined) throw new Error(`There is no quantity ${key}.`);
  return found;
}

/**
 * A row of a works' own, completed from its format.
 * @param row `label`, `format` and what differs from the usual
 */
export function ownQuantity(row: Row): Quantity {
  return quantity({ source: 'the works', ...row });
}

/** A quantity of a key that is not known any more, so that what was read of it can still be shown as a number. */
export function unknownQuantity(key: string): Quantity {
  return quantity({ key, label: key, format: 'number', source: 'unknown' });
}

/** Place of a quantity in the order of testing; a works' own come last, by key. */
export function compareQuantities(a: Quantity, b: Quantity): number {
  const place = ({ key }: Quantity): number => {
    const at = QUANTITIES.findIndex((each) => each.key === key);
    return at < 0 ? QUANTITIES.length : at;
  };
  return place(a) - place(b) || a.key.localeCompare(b.key, 'en');
}
