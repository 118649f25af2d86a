import { formatValue } from './format';
import { parseDecimal } from './decimal';
import type { EntryUnit, Quantity } from './quantities';
import type { PeakDetector } from './types';
import { dbmToW, diodeToW, vPkToW, vPpToW, vRmsToW, wToDbm } from './units';

/** What is known at the cell. */
export interface EntryOptions {
  /** Unit the column remembers, as typed last time. */
  columnUnit?: string | undefined;
  /** Level of the carrier at the meter, dBm; needed for a product typed in dBm. */
  refPowerDbm?: number | undefined;
  /** Load that voltages stand across, Ω; default 50. */
  loadOhm?: number | undefined;
  /** What Vdc stands for, where the instrument is a diode detector. */
  detector?: PeakDetector | undefined;
  /** Largest value that this rig is meant to reach, in the SI unit; ten times as much is asked about. */
  expectedMax?: number | undefined;
  /** True when the person has said that an entry that was asked about is meant. */
  confirmed?: boolean | undefined;
}

/** A read entry in the SI unit of the quantity (dBc for ratios), at the meter; or why not. */
export type EntryResult =
  | {
      ok: true;
      value: number;
      /** Unit of `value`. */
      unit: string;
      /** Unit it was entered in, for the column to remember. */
      enteredUnit: string;
    }
  | {
      ok: false;
      reason: string;
      /** True where the same entry is taken once the person confirms it. */
      ask: boolean;
    };

const PREFIXES: Record<string, number> = { '': 1, n: 1e-9, µ: 1e-6, u: 1e-6, m: 1e-3, k: 1e3, M: 1e6 };

/** Ways in which people write the units; prefixes come before. Units in dB take none. */
const SPELLINGS: Record<EntryUnit, readonly string[]> = {
  dBm: ['dbm'],
  dBc: ['dbc', 'db'],
  dB: ['db'],
  W: ['w', 'watt', 'watts'],
  Vrms: ['vrms', 'veff'],
  Vpk: ['vpk', 'vp', 'vpeak'],
  Vpp: ['vpp', 'vpkpk', 'vptp'],
  Vdc: ['vdc', 'vdiode'],
  A: ['a', 'amp', 'amps'],
  V: ['v', 'volt', 'volts'],
  Hz: ['hz'],
  s: ['s', 'sec'],
  '°C': ['°c', 'degc', 'c'],
  K: ['k', 'kelvin'],
  '%': ['%', 'percent'],
  '1': ['1', ''],
  'yes/no': ['yes/no'],
};

const YES = new Set(['y', 'yes', 'ok', 'pass', 'true', '1', '✓', '✔', '☑']);
const NO = new Set(['n', 'no', 'fail', 'false', '0', '✗', '✘', '☐']);

/** Above these an entry is asked about where the rig's own figure is not known, in the units inside. */
const PLAUSIBLE: Partial<Record<Quantity['format'], number>> = {
  power: 200,
  current: 30,
  voltage: 100,
  frequency_error: 100e3,
  time: 10,
  temperature: 473.15,
  percent: 1,
};
const WELL_OVER = 10;
const ZERO_CELSIUS_K = 273.15;

const UNPREFIXED: ReadonlySet<EntryUnit> = new Set(['dBm', 'dBc', 'dB', '°C', 'K', '%', '1']);

interface ParsedUnit {
  base: EntryUnit;
  factor: number;
  /** With its prefix, as the column remembers it. */
  name: string;
}

type UnitResult = { ok: true; unit: ParsedUnit } | { ok: false; reason: string };

function refuse(reason: string, ask = false): { ok: false; reason: string; ask: boolean } {
  return { ok: false, reason, ask };
}

function examples(quantity: Quantity): string {
  if (quantity.unit === 'W') return 'dBm, W, mW, Vrms, Vpk, Vpp or Vdc of a detector';
  if (quantity.unit === 'A') return 'mA or A';
  if (quantity.unit === 'V') return 'mV or V';
  if (quantity.unit === 's') return 'µs, ms or s';
  if (quantity.unit === 'Hz') return quantity.format === 'frequency' ? 'Hz, kHz or MHz' : 'Hz or kHz';
  return quantity.entryUnits.join(' or ');
}

function parseUnit(text: string, quantity: Quantity): UnitResult {
  const plain = text.replace(/[\s._-]/g, '').replace('\u03bc', 'µ');
  const lower = plain.toLowerCase();
  if ((lower === 'v' || lower === 'mv') && !quantity.entryUnits.includes('V')) {
    return { ok: false, reason: 'Say which volts: Vrms, Vpk, Vpp, or Vdc of a diode detector.' };
  }
  for (const base of quantity.entryUnits) {
    for (const spelling of SPELLINGS[base]) {
      if (!lower.endsWith(spelling)) continue;
      const prefix = plain.slice(0, plain.length - spelling.length);
      const factor = PREFIXES[prefix] ?? PREFIXES[prefix === 'K' ? 'k' : '?'];
      if (factor === undefined) continue;
      if (prefix === 'M' && quantity.format !== 'frequency') {
        return { ok: false, reason: `M${base} means millions of ${base}; write m${base} for thousandths.` };
      }
      if (UNPREFIXED.has(base) && prefix !== '') continue;
      const shown = prefix === 'u' ? 'µ' : prefix === 'K' ? 'k' : prefix;
      return { ok: true, unit: { base, factor, name: `${shown}${base}` } };
    }
  }
  return {
    ok: false,
    reason: `“${text}” does not fit ${quantity.label.toLowerCase()}: use ${examples(quantity)}.`,
  };
}

function parseCheck(text: string): EntryResult {
  const word = text.toLowerCase();
  if (YES.has(word)) return { ok: true, value: 1, unit: '', enteredUnit: 'yes/no' };
  if (NO.has(word)) return { ok: true, value: 0, unit: '', enteredUnit: 'yes/no' };
  return refuse('Answer yes or no.');
}

type ValueResult = { ok: true; value: number } | { ok: false; reason: string; ask: boolean };

function toPower(number: number, unit: ParsedUnit, options: EntryOptions): ValueResult {
  if (unit.base === 'dBm') return { ok: true, value: dbmToW(number) };
  if (number < 0)
    return refuse(`A power or voltage is not below zero; is ${unit.name} the right unit, or dBm meant?`);
  const size = number * unit.factor;
  const loadOhm = options.loadOhm ?? 50;
  if (unit.base === 'Vrms') return { ok: true, value: vRmsToW(size, loadOhm) };
  if (unit.base === 'Vpk') return { ok: true, value: vPkToW(size, loadOhm) };
  if (unit.base === 'Vpp') return { ok: true, value: vPpToW(size, loadOhm) };
  if (unit.base !== 'Vdc') return { ok: true, value: size };
  if (options.detector === undefined) {
    return refuse('State the drop of the detector’s diode and where it taps the load first.');
  }
  return { ok: true, value: diodeToW(size, options.detector.dropV, options.detector.tapRatio, loadOhm) };
}

/** A level in dBm or dB, a temperature, a share, or a plain size. */
function toOther(number: number, unit: ParsedUnit, options: EntryOptions): ValueResult {
  if (unit.base === '°C') return { ok: true, value: number + ZERO_CELSIUS_K };
  if (unit.base === '%') return { ok: true, value: number / 100 };
  if (unit.base !== 'Vrms') return { ok: true, value: number * unit.factor };
  if (number <= 0) return refuse('A generator’s level in volts is above zero.');
  return { ok: true, value: wToDbm(vRmsToW(number * unit.factor, options.loadOhm ?? 50)) };
}

function toRatio(number: number, signed: boolean, unit: ParsedUnit, options: EntryOptions): ValueResult {
  if (unit.base === 'dBm') {
    if (options.refPowerDbm === undefined) {
      return refuse('Enter the power of this band first: dBm of a product needs the dBm of its carrier.');
    }
    return { ok: true, value: number - options.refPowerDbm };
  }
  // Nobody types the minus of a harmonic: 51 is −51 unless a plus says otherwise.
  return { ok: true, value: signed ? number : -number };
}

function implausible(value: number, quantity: Quantity, options: EntryOptions): string | null {
  if (quantity.unit === 'dBc') {
    if (value >= 0) return 'That is a product as strong as the carrier or stronger. Is it meant?';
    return value < -150 ? 'That is below what any analyser sees. Is it meant?' : null;
  }
  const bound =
    options.expectedMax === undefined
      ? PLAUSIBLE[quantity.format]
      : Math.abs(options.expectedMax) * WELL_OVER;
  if (bound === undefined || Math.abs(value) <= bound) return null;
  const shown = formatValue(value, quantity);
  return options.expectedMax === undefined
    ? `${shown} is more than this bench expects. Is it meant?`
    : `${shown} is far above the ${formatValue(options.expectedMax, quantity)} of this rig. Is it meant?`;
}

/**
 * Reads what a person typed into a cell. Takes a decimal point or comma, SI prefixes, the typographic minus,
 * and the unit of the entry or else of the column. What makes no sense is asked about (`ask: true`, taken with
 * `confirmed`) or refused with a sentence.
 */
export function parseEntry(text: string, quantity: Quantity, options: EntryOptions = {}): EntryResult {
  if (quantity.formula !== null)
    return refuse(`${quantity.label} is computed from other readings and not typed.`);
  const clean = text
    .normalize('NFC')
    .replace(/[\u2212\u2012-\u2014\ufe63\uff0d]/g, '-')
    .trim();
  if (clean === '') return refuse('The cell is empty.');
  if (quantity.format === 'yes_no') return parseCheck(clean);

  const split = /^([+-]?\s*[\d.,'’\u00a0\u2009\u202f ]*\d(?:[.,](?!\d))?(?:e[+-]?\d+)?)\s*(.*)$/iu.exec(
    clean,
  );
  if (split === null) return refuse(`“${text.trim()}” does not begin with a number.`);
  const number = parseDecimal(split[1] ?? '');
  if (!number.ok) return refuse(number.reason);

  const typedUnit = (split[2] ?? '').trim();
  const unitText = typedUnit !== '' ? typedUnit : (options.columnUnit ?? quantity.defaultUnit);
  if (unitText === null) return refuse(`Which unit: ${examples(quantity)}?`);
  const parsed = parseUnit(unitText, quantity);
  if (!parsed.ok) return refuse(parsed.reason);
  const { unit } = parsed;

  let result: ValueResult;
  if (quantity.unit === 'W') result = toPower(number.value, unit, options);
  else if (quantity.unit === 'dBc') result = toRatio(number.value, number.signed, unit, options);
  else result = toOther(number.value, unit, options);
  if (!result.ok) return result;

  const { value } = result;
  if (!Number.isFinite(value)) return refuse('The number is too large.');
  if (quantity.unit === 'A' && value < 0)
    return refuse('A current is not below zero: are the leads swapped?');
  if (quantity.unit === 's' && value < 0) return refuse('A time is not below zero.');
  if (quantity.unit === 'K' && value < 0) return refuse('Nothing is colder than −273.15 °C.');
  if (quantity.unit === 'W' && value === 0)
    return refuse('No power at all: is the unit keyed and the lead on?');
  const question = options.confirmed === true ? null : implausible(value, quantity, options);
  if (question !== null) return refuse(question, true);
  return { ok: true, value, unit: quantity.unit, enteredUnit: unit.name };
}
