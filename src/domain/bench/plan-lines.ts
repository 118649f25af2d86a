import { parseCondition } from '~/domain/planning/condition';
import { BAND_KEYS } from './bands';
import { parseDecimal } from './decimal';
import { parseEntry } from './entry';
import type { Quantity, QuantityBook } from './quantities';
import type { BandKey, TestPoint } from './types';

/** A point of a test plan as it stands in a table that people edit: everything is text. */
export interface PlanLine {
  quantity: string;
  band: string;
  freq: string;
  lower: string;
  upper: string;
  limitRule: string;
  decision: string;
  required: string;
  condition: string;
  supply: string;
  method: string;
}

export type PlanField = keyof PlanLine;

/** A point as a plan keeps it. */
export type PlanPoint = Omit<TestPoint, 'id' | 'position' | 'quantity'> & { quantityKey: string };

export type PlanFaults = Partial<Record<PlanField, string>>;

/** A row in which nothing is chosen yet. */
export const emptyLine: PlanLine = {
  quantity: '',
  band: '',
  freq: '',
  lower: '',
  upper: '',
  limitRule: 'fixed',
  decision: 'simple',
  required: 'yes',
  condition: '',
  supply: '',
  method: '',
};

/** Digits that a limit keeps: more than any instrument has, fewer than binary fractions show. */
const digits = 12;
const tidy = (value: number): number => Number(value.toPrecision(digits));

/**
 * A limit as it is written in a plan, in the unit of its quantity: `4 W`, `−43`, `900 mA`. Unlike a reading it may be of
 * a quantity that is computed.
 */
export function readLimit(
  text: string,
  quantity: Quantity,
): { ok: true; value: number } | { ok: false; reason: string } {
  const read = parseEntry(text, { ...quantity, formula: null }, { confirmed: true });
  return read.ok ? { ok: true, value: tidy(read.value) } : { ok: false, reason: read.reason };
}

const zeroCelsiusK = 273.15;

/** As {@link readLimit} reads it, with every digit that it has. */
export function writeLimit(value: number | null, { format, unit }: Quantity): string {
  if (value === null) return '';
  const number = (size: number) => String(tidy(size)).replace('-', '\u2212');
  switch (format) {
    case 'ratio':
      return number(value);
    case 'current':
    case 'voltage':
    case 'time':
      return Math.abs(value) < 1 ? `${number(value * 1e3)} m${unit}` : `${number(value)} ${unit}`;
    case 'temperature':
      return `${number(value - zeroCelsiusK)} °C`;
    case 'percent':
      return `${number(value * 100)} %`;
    case 'yes_no':
      return value === 1 ? 'yes' : 'no';
    case 'number':
      return number(value);
    case 'power':
    case 'level':
    case 'frequency':
    case 'frequency_error':
      return `${number(value)} ${unit}`;
  }
}

/** A frequency in kHz without its unit, `7030`; with one of Hz, kHz and MHz; or as figures of MHz, `7.030`. */
export function readFrequency(text: string): { ok: true; freqHz: number } | { ok: false; reason: string } {
  const match = /^([\d.,]+)\s*(hz|khz|mhz)?$/i.exec(text.trim());
  const number = match === null ? null : parseDecimal(match[1] ?? '');
  if (number === null || !number.ok || !(number.value > 0)) {
    return { ok: false, reason: 'Write a frequency as 7030 kHz or 7.030 MHz.' };
  }
  const unit = match?.[2]?.toLowerCase() ?? (number.value < 1000 ? 'mhz' : 'khz');
  const factor = unit === 'mhz' ? 1e6 : unit === 'khz' ? 1e3 : 1;
  return { ok: true, freqHz: tidy(number.value * factor) };
}

/** As {@link readFrequency} reads it. */
export function writeFrequency(freqHz: number | null): string {
  return freqHz === null ? '' : `${String(tidy(freqHz / 1e3))} kHz`;
}

/** The text of a point for the table. */
export function writePlanLine(point: TestPoint): PlanLine {
  const { quantity, lower, upper } = point;
  return {
    quantity: quantity.key,
    band: point.band ?? '',
    freq: writeFrequency(point.freqHz),
    lower: writeLimit(lower, quantity),
    upper: writeLimit(upper, quantity),
    limitRule: point.limitRule,
    decision: point.decision,
    required: point.required ? 'yes' : 'no',
    condition: point.condition ?? '',
    supply: point.supplyV === null ? '' : String(point.supplyV),
    method: point.method,
  };
}

/** Whether a row of the table is still empty, and so no point. */
export function isEmptyLine(line: PlanLine): boolean {
  const { quantity, band, freq, lower, upper, condition, supply, method } = line;
  return [quantity, band, freq, lower, upper, condition, supply, method].every((text) => text.trim() === '');
}

/** Reads a row of the table; where it cannot be used, a sentence for each field that is wrong. */
export function readPlanLine(
  line: PlanLine,
  quantities: QuantityBook,
): { ok: true; point: PlanPoint } | { ok: false; faults: PlanFaults } {
  const faults: PlanFaults = {};
  const quantity = quantities.get(line.quantity);
  if (quantity === undefined) {
    faults.quantity = line.quantity === '' ? 'Choose what is measured.' : 'There is no such quantity.';
  }
  const band = bandIn(line.band);
  if (band === undefined) faults.band = 'Choose the band from the list.';
  const freqHz = line.freq.trim() === '' ? null : readFrequency(line.freq);
  if (freqHz?.ok === false) faults.freq = freqHz.reason;
  const limitIn = (field: 'lower' | 'upper'): number | null => {
    if (quantity === undefined || line[field].trim() === '') return null;
    const read = readLimit(line[field], quantity);
    if (read.ok) return read.value;
    faults[field] = read.reason;
    return null;
  };
  const lower = limitIn('lower');
  const upper = limitIn('upper');
  if (lower !== null && upper !== null && lower > upper) faults.upper = 'It is below the lower limit.';
  const isLegal = line.limitRule === 'spurious';
  if (isLegal && quantity !== undefined && quantity.format !== 'ratio') {
    faults.limitRule = 'An emission rule limits a ratio to the carrier, which this is not.';
  }
  if (isLegal && line.decision === 'simple') {
    faults.decision = 'A legal limit is decided with a guard band.';
  }
  const condition = line.condition.trim();
  const parsed = condition === '' ? null : parseCondition(condition);
  if (parsed?.ok === false) faults.condition = parsed.reason;
  const supply = line.supply.trim() === '' ? null : parseDecimal(line.supply.replace(/\s*V$/i, '').trim());
  if (supply !== null && (!supply.ok || !(supply.value > 0) || supply.value > 100)) {
    faults.supply = 'The supply in V, such as 12.0.';
  }
  if (line.method.length > 200) faults.method = 'At most 200 characters.';
  if (condition.length > 500) faults.condition = 'At most 500 characters.';
  if (quantity === undefined || band === undefined || Object.keys(faults).length > 0) {
    return { ok: false, faults };
  }
  return {
    ok: true,
    point: {
      quantityKey: quantity.key,
      ...{ band, lower, upper },
      freqHz: freqHz?.ok === true ? freqHz.freqHz : null,
      limitRule: isLegal ? 'spurious' : 'fixed',
      decision: line.decision === 'guarded' ? 'guarded' : 'simple',
      required: line.required !== 'no',
      condition: condition === '' ? null : condition,
      supplyV: supply?.ok === true ? supply.value : null,
      method: line.method.trim(),
    },
  };
}

function bandIn(text: string): BandKey | null | undefined {
  return text === '' ? null : BAND_KEYS.find((band) => band === text);
}
