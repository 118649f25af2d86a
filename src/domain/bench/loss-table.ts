import { FREQ_UNITS, freqUnitOf, rowProblem } from './loss-rows';
import type { FreqUnit, LossReading } from './loss-rows';
import { decodeText } from '~/domain/bench/sweep/decode';
import { readTouchstone } from './touchstone';

/** Where frequency and loss stand in a line, and how they are to be taken. */
interface Columns {
  freq: number;
  loss: number;
  width: number;
  unit: FreqUnit | undefined;
  /** −1 where the column holds S21 in dB. */
  sign: 1 | -1;
}

const TWO: Columns = { freq: 0, loss: 1, width: 2, unit: undefined, sign: 1 };
const NUMBER = /^([+-]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+-]?\d+)?)\s*([a-z]*)$/i;

// The first that parts a line in two or more applies: a comma before a blank or after a unit is no decimal comma.
const SEPARATORS = [/[;\t]/, /,\s+|(?<=[a-z)])\s*,\s*/i, /\s+(?=[+-]?[\d.,])/, /,/];

const HEADING_SEPARATORS = [/[;\t]/, /,/];

function cellsOf(line: string, separators: readonly RegExp[]): string[] {
  const clean = line.replaceAll('\u2212', '-').trim();
  for (const separator of separators) {
    const cells = clean.split(separator).map((cell) =>
      cell
        .trim()
        .replace(/^"(.*)"$/, '$1')
        .trim(),
    );
    while (cells.length > 1 && cells.at(-1) === '') cells.pop();
    if (cells.length > 1) return cells;
  }
  return [clean];
}

function isHeading(cells: readonly string[]): boolean {
  return cells.every((cell) => !/^[+-]?[.,]?\d/.test(cell) && !/^(nan|[+-]?inf)/i.test(cell));
}

/** Which columns a heading names. */
function columnsOf(cells: readonly string[], line: number): Columns | string {
  if (cells.length < 2) return { ...TWO, ...unitIn(cells[0] ?? '') };
  const freq = Math.max(
    0,
    cells.findIndex((cell) => /freq|\bf\b|hz/i.test(cell)),
  );
  const named = cells.flatMap((cell, index) => (/loss|atten|s21|s12/i.test(cell) ? [index] : []));
  const others = cells.flatMap((_, index) => (index === freq ? [] : [index]));
  const [loss, second] = named.length > 0 ? named : others;
  if (loss === undefined || second !== undefined) {
    return `Line ${line} heads ${cells.length} columns: head the one to be read with “loss”, and no other.`;
  }
  const isS21 = /s21|s12/i.test(cells[loss] ?? '') && !/loss|atten/i.test(cells[loss] ?? '');
  return { freq, loss, width: cells.length, ...unitIn(cells[freq] ?? ''), sign: isS21 ? -1 : 1 };
}

function unitIn(heading: string): { unit: FreqUnit | undefined; sign: 1 } {
  return { unit: freqUnitOf(/\b([kmg]?hz)\b/i.exec(heading)?.[1] ?? ''), sign: 1 };
}

/** Whether the table's commas can be told from marks between thousands. */
class CommaMarks {
  private hasPoint = false;
  private isDecimal = false;
  private unclearLine: number | null = null;

  see(text: string, line: number): void {
    if (text.includes('.')) this.hasPoint = true;
    if (!text.includes(',')) return;
    if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(text)) this.unclearLine ??= line;
    else this.isDecimal = true;
  }

  problem(): string | null {
    if (this.hasPoint && this.isDecimal)
      return 'The table has decimal points and decimal commas: use one of them.';
    if (this.unclearLine === null || this.isDecimal) return null;
    return `Line ${this.unclearLine} has a comma that may part thousands: write the number with a point, or without it.`;
  }
}

/**
 * Reads a loss table as typed or as CSV: frequency and loss on each line, parted by blanks, tabs, commas or
 * semicolons, with units in the cells (`7 MHz 40.2`) or in a heading; decimal point or comma; lines that begin
 * with `!` or `#` are remarks. Never throws.
 *
 * @param unit of frequencies, where the table does not say it
 */
export function readLossTable(text: string, unit?: FreqUnit): LossReading {
  let columns: Columns = TWO;
  const rows: [number, number][] = [];
  const marks = new CommaMarks();
  for (const [index, raw] of text
    .replace(/^\ufeff/, '')
    .split(/\r\n|\r|\n/)
    .entries()) {
    const line = index + 1;
    if (raw.trim() === '' || /^\s*[!#]/.test(raw)) continue;
    const headings = rows.length === 0 ? cellsOf(raw, HEADING_SEPARATORS) : [];
    if (headings.length > 0 && isHeading(headings)) {
      const named = columnsOf(headings, line);
      if (typeof named === 'string') return { ok: false, reason: named };
      columns = named;
      continue;
    }
    const row = rowOf(cellsOf(raw, SEPARATORS), columns, line, unit, marks);
    if (typeof row === 'string') return { ok: false, reason: row };
    const problem = rowProblem(line, ...row, rows.at(-1)?.[0] ?? 0, rows.length + 1);
    if (problem !== null) return { ok: false, reason: problem };
    rows.push(row);
  }
  if (rows.length === 0) {
    return {
      ok: false,
      reason: 'The table has no rows: write a frequency and its loss on each line, as 7 MHz 40.2.',
    };
  }
  const unclear = marks.problem();
  return unclear === null ? { ok: true, rows, vswr: null, note: '' } : { ok: false, reason: unclear };
}

function rowOf(
  cells: readonly string[],
  { freq, loss, width, unit: headed, sign }: Columns,
  line: number,
  unit: FreqUnit | undefined,
  marks: CommaMarks,
): [number, number] | string {
  if (cells.length !== width) {
    const columns = cells.length === 1 ? '1 column' : `${cells.length} columns`;
    return `Line ${line} has ${columns} where ${width} are expected: a frequency and its loss.`;
  }
  const [freqCell, lossCell] = [cells[freq] ?? '', cells[loss] ?? ''];
  const [freqParts, lossParts] = [NUMBER.exec(freqCell), NUMBER.exec(lossCell)];
  if (freqParts === null) return `Line ${line}: “${shortened(freqCell)}” is not a frequency.`;
  if (lossParts === null) return `Line ${line}: “${shortened(lossCell)}” is not a loss in dB.`;
  const [, freqText = '', freqWord = ''] = freqParts;
  const [, lossText = '', lossWord = ''] = lossParts;
  if (lossWord !== '' && lossWord.toLowerCase() !== 'db') {
    return `Line ${line}: a loss is in dB, not in ${shortened(lossWord)}.`;
  }
  const unitOfRow = freqWord === '' ? (headed ?? unit) : freqUnitOf(freqWord);
  if (unitOfRow === undefined) {
    return freqWord === ''
      ? `Line ${line} does not say the unit of its frequency: write it as 7 MHz, or choose the unit.`
      : `Line ${line}: ${shortened(freqWord)} is not a unit of frequency; use Hz, kHz, MHz or GHz.`;
  }
  marks.see(freqText, line);
  marks.see(lossText, line);
  return [
    numberOf(freqText) * FREQ_UNITS[unitOfRow],
    // A zero keeps no sign.
    sign * numberOf(lossText) || 0,
  ];
}

function numberOf(text: string): number {
  return Number(text.replace(',', '.'));
}

function shortened(text: string): string {
  return text.length <= 30 ? text : `${text.slice(0, 29)}…`;
}

/**
 * Reads the file of a loss table: Touchstone by the end of its name (`.s1p`, `.s2p`), otherwise as CSV. Never
 * throws.
 */
export function readLossFile(bytes: Uint8Array, name: string, unit?: FreqUnit): LossReading {
  const decoded = decodeText(bytes);
  if (!decoded.ok) return decoded;
  const ports = /\.s(\d+)p$/i.exec(name.trim())?.[1];
  if (ports === '1' || ports === '2') return readTouchstone(decoded.text, ports === '1' ? 1 : 2);
  if (ports !== undefined) {
    return { ok: false, reason: `A file of ${ports} ports is not read: export the part as .s2p.` };
  }
  if (/^\s*#\s*([kmg]?hz\b|s\b)/im.test(decoded.text)) {
    return {
      ok: false,
      reason: 'This is a Touchstone file by its content: its name has to end in .s1p or .s2p.',
    };
  }
  return readLossTable(decoded.text, unit);
}

/** The rows as they are typed, to be shown in a field again: `7 MHz 40.2`. */
export function lossTableText(rows: readonly (readonly [number, number])[]): string {
  return rows.map(([freqHz, lossDb]) => `${freqText(freqHz)} ${String(lossDb)}`).join('\n');
}

/** A frequency with all its digits, so that reading it again gives the same number. */
function freqText(freqHz: number): string {
  for (const unit of ['GHz', 'MHz', 'kHz'] as const) {
    const size = freqHz / FREQ_UNITS[unit];
    if (size >= 1 && size * FREQ_UNITS[unit] === freqHz && String(size).length <= 12)
      return `${String(size)} ${unit}`;
  }
  return `${String(freqHz)} Hz`;
}
