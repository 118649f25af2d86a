import { formatFrequency, formatNumber } from './format';
import { FREQ_UNITS, freqUnitOf, rowProblem } from './loss-rows';
import type { FreqUnit, LossReading } from './loss-rows';

/** What the option line of a file says; what it leaves out is as the specification has it. */
interface Options {
  unit: FreqUnit;
  format: 'MA' | 'DB' | 'RI';
  ohm: number;
}

/** `# GHz S MA R 50` (Touchstone File Format Specification, rev. 1.1, “Option line”). */
const DEFAULTS: Options = { unit: 'GHz', format: 'MA', ohm: 50 };
const LINE_OHM = 50;

function optionsOf(text: string, line: number): Options | string {
  const options = { ...DEFAULTS };
  const words = text.replace(/^#/, '').trim().split(/\s+/).filter(Boolean);
  for (let index = 0; index < words.length; index += 1) {
    const word = words[index]?.toUpperCase() ?? '';
    const unit = freqUnitOf(word);
    if (unit !== undefined) options.unit = unit;
    else if (word === 'MA' || word === 'DB' || word === 'RI') options.format = word;
    else if (/^[YZGH]$/.test(word)) {
      return `Line ${line} says ${word} parameters: export the part as S parameters.`;
    } else if (word === 'R') {
      index += 1;
      options.ohm = Number(words[index] ?? 'none');
      if (!(options.ohm > 0)) return `Line ${line} states no usable reference resistance after R.`;
    } else if (word !== 'S') {
      return `Line ${line}: “${word.slice(0, 20)}” is not known in an option line.`;
    }
  }
  if (options.ohm !== LINE_OHM) {
    return `Line ${line} refers to ${formatNumber(options.ohm, 0)} Ω: the bench is ${LINE_OHM} Ω, export the part for that.`;
  }
  return options;
}

/** Magnitude of a parameter as dB; −Infinity for none. */
function levelDb([first, second]: readonly [number, number], format: Options['format']): number {
  if (format === 'DB') return first;
  return 20 * Math.log10(format === 'MA' ? first : Math.hypot(first, second));
}

/** Standing wave ratio of a reflection; null where everything or more comes back. @param db of the reflection */
function vswrOf(db: number): number | null {
  const rho = 10 ** (db / 20);
  return rho < 1 ? (1 + rho) / (1 - rho) : null;
}

/**
 * Reads a Touchstone file of version 1: S21 of two ports as a loss, with the largest standing wave ratio of both
 * ports; of one port there is only the return loss, which gives a standing wave ratio and no loss. Never throws.
 * Source: Touchstone File Format Specification, rev. 1.1 (option line, order of two-port data, comments).
 */
export function readTouchstone(text: string, ports: 1 | 2): LossReading {
  let options: Options | null = null;
  const rows: [number, number][] = [];
  let worst = 1;
  let allComesBack = false;
  let span: [number, number] | null = null;
  for (const [index, raw] of text
    .replace(/^\ufeff/, '')
    .split(/\r\n|\r|\n/)
    .entries()) {
    const line = index + 1;
    const content = (raw.split('!')[0] ?? '').trim();
    if (content === '') continue;
    if (content.startsWith('[')) {
      return {
        ok: false,
        reason: `Line ${line} belongs to version 2 of the format: save the file as version 1.`,
      };
    }
    if (content.startsWith('#')) {
      const found: Options | string = options ?? optionsOf(content, line);
      if (typeof found === 'string') return { ok: false, reason: found };
      options = found;
      continue;
    }
    if (options === null) {
      return {
        ok: false,
        reason: `Line ${line} has numbers before the option line: the file has to begin with one, as # MHz S DB R 50.`,
      };
    }
    const row = pointOf(content, line, ports, options);
    if (typeof row === 'string') return { ok: false, reason: row };
    const problem = rowProblem(line, row.freqHz, row.lossDb, span?.[1] ?? 0, rows.length + 1);
    if (problem !== null) return { ok: false, reason: problem };
    rows.push([row.freqHz, row.lossDb]);
    span = [span?.[0] ?? row.freqHz, row.freqHz];
    allComesBack ||= row.vswr === null;
    worst = Math.max(worst, row.vswr ?? 1);
  }
  if (span === null) return { ok: false, reason: 'The file has no rows of numbers.' };
  if (ports === 2) return { ok: true, rows, vswr: allComesBack ? null : worst, note: '' };
  return {
    ok: true,
    rows: [],
    vswr: worst,
    note:
      'A file of one port holds a return loss, which says how much comes back and not how much is lost on the way: ' +
      `its standing wave ratio was taken, the largest from ${formatFrequency(span[0])} to ${formatFrequency(span[1])}. Type the loss.`,
  };
}

interface Point {
  freqHz: number;
  lossDb: number;
  vswr: number | null;
}

function pointOf(content: string, line: number, ports: 1 | 2, { unit, format }: Options): Point | string {
  const words = content.split(/[\s,]+/).filter(Boolean);
  const wanted = ports === 1 ? 3 : 9;
  const numbers = words.map((word) =>
    /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(word) ? Number(word) : NaN,
  );
  const wrong = words[numbers.findIndex((number) => Number.isNaN(number))];
  if (wrong !== undefined) return `Line ${line}: “${wrong.slice(0, 20)}” is not a number.`;
  if (numbers.length !== wanted) {
    return (
      `Line ${line} has ${numbers.length} numbers where a file of ${ports === 1 ? 'one port' : 'two ports'} has ${wanted}` +
      (ports === 2 && numbers.length === 5 ? ': take the noise parameters out.' : '.')
    );
  }
  // Two ports come as S11, S21, S12, S22, each a pair.
  const pair = (index: number): [number, number] => [
    numbers[2 * index + 1] ?? NaN,
    numbers[2 * index + 2] ?? NaN,
  ];
  if (format === 'MA' && [0, 1, 2, 3].some((index) => pair(index)[0] < 0)) {
    return `Line ${line} has a magnitude below zero.`;
  }
  const freqHz = (numbers[0] ?? NaN) * FREQ_UNITS[unit];
  const reflected = vswrOf(levelDb(pair(0), format));
  if (ports === 1) {
    if (reflected === null) {
      return `Line ${line} says that everything comes back or more: there is no standing wave ratio to take.`;
    }
    return { freqHz, lossDb: 0, vswr: reflected };
  }
  const transmitted = levelDb(pair(1), format);
  if (transmitted === -Infinity) return `Line ${line} has an S21 of zero: no loss follows from it.`;
  const other = vswrOf(levelDb(pair(3), format));
  const both = reflected === null || other === null ? null : Math.max(reflected, other);
  return { freqHz, lossDb: -transmitted || 0, vswr: both };
}
