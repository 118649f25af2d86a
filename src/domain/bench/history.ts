import { readTypedSerial } from '~/domain/production/typed-serial';
import { BAND_KEYS } from './bands';
import { parseEntry } from './entry';
import type { QuantityBook } from './quantities';
import type { BandKey } from './types';

/** What a column of an old sheet holds: `serial`, `date`, the key of a quantity, or nothing that is taken. */
export interface HistoryColumn {
  meaning: string;
  /** Of a quantity that is measured on each band. */
  band: string;
  /** Of cells that carry none. */
  unit: string;
}

export interface HistoryReading {
  quantityKey: string;
  band: BandKey | null;
  enteredText: string;
  enteredUnit: string;
  /** In the unit of the quantity inside. */
  value: number;
}

export interface HistorySheet {
  /** Of the table, from 1, its header not counted. */
  row: number;
  serial: string;
  /** `YYYY-MM-DD`; null where the sheet does not say. */
  testedOn: string | null;
  readings: HistoryReading[];
}

/** A cell or a whole row that cannot be taken, and why. */
export interface HistoryRefusal {
  row: number;
  /** As its header says. */
  column: string;
  text: string;
  reason: string;
}

export interface HistoryTable {
  header: string[];
  columns: HistoryColumn[];
  sheets: HistorySheet[];
  refused: HistoryRefusal[];
}

export const mostHistoryRows = 5000;
const mostColumns = 60;
const longestText = 60;

const wordings: readonly (readonly [meaning: string, pattern: RegExp])[] = [
  ['serial', /\b(serial|s\/n|sn|unit|no\.?)\b/i],
  ['date', /\b(date|tested|day)\b/i],
  ['harmonic_2', /\b(2nd|second|2f|h2|2\.)\b|\bharmonic 2\b/i],
  ['harmonic_3', /\b(3rd|third|3f|h3|3\.)\b|\bharmonic 3\b/i],
  ['spurious', /\bspur/i],
  ['current_key_down', /\b(key.?down|tx current|transmit current|current tx|i tx)\b/i],
  ['current_rest', /\b(rest|rx current|receive current|current rx|idle|i rx)\b/i],
  ['frequency_error', /\b(freq\w* error|error)\b/i],
  ['sensitivity', /\b(sensitivity|mds)\b/i],
  ['supply_voltage', /\b(supply|voltage)\b/i],
  ['rf_power', /\b(power|output|pwr|po)\b/i],
];

/** What a column most likely holds, from its heading: `40 m power [W]`. */
export function guessColumn(heading: string, quantities: QuantityBook): HistoryColumn {
  const plain = heading.replaceAll(/[_\u00a0]/g, ' ').trim();
  const band = BAND_KEYS.find((key) => new RegExp(`\\b${key.slice(0, -1)}\\s*m\\b`, 'i').test(plain)) ?? '';
  const unit =
    /[[(]\s*([^\])]{1,8})\s*[\])]\s*$/.exec(plain)?.[1]?.trim() ??
    /\b(dBm|dBc|mA|mW)$/.exec(plain)?.[1] ??
    '';
  const byName = [...quantities.values()].find(
    ({ key, label }) => plain.toLowerCase() === key || plain.toLowerCase().includes(label.toLowerCase()),
  );
  const without = plain.replace(new RegExp(`\\b${band.slice(0, -1) || '\\d+'}\\s*m\\b`, 'i'), '');
  const meaning = byName?.key ?? wordings.find(([, pattern]) => pattern.test(without))?.[0] ?? '';
  return { meaning, band, unit };
}

/**
 * Reads a table of old test sheets, a sheet a row under a row of headings. What cannot be read is left out and named, cell
 * by cell; nothing of it is judged.
 *
 * @param columns as somebody has corrected them; guessed where there are none
 */
export function readHistory(
  rows: readonly (readonly string[])[],
  columns: readonly HistoryColumn[] | null,
  quantities: QuantityBook,
): ({ ok: true } & HistoryTable) | { ok: false; reason: string } {
  const [first, ...rest] = rows.filter((cells) => cells.some((cell) => cell.trim() !== ''));
  if (first === undefined) return { ok: false, reason: 'Nothing was pasted.' };
  if (rest.length === 0)
    return { ok: false, reason: 'Only a row of headings was pasted; the sheets come under it.' };
  if (rest.length > mostHistoryRows) {
    return {
      ok: false,
      reason: `Those are ${String(rest.length)} rows; paste at most ${String(mostHistoryRows)} at once.`,
    };
  }
  if (first.length > mostColumns) {
    return { ok: false, reason: `A table has at most ${String(mostColumns)} columns here.` };
  }
  const header = first.map((text) => text.trim());
  const known = header.map((text, index) => columns?.[index] ?? guessColumn(text, quantities));
  const read = rest.map((cells, index) => readRow(cells, index + 1, header, known, quantities));
  return {
    ok: true,
    header,
    columns: known,
    sheets: read.flatMap(({ sheet }) => (sheet === null ? [] : [sheet])),
    refused: read.flatMap(({ refused }) => refused),
  };
}

interface ReadRow {
  sheet: HistorySheet | null;
  refused: HistoryRefusal[];
}

function readRow(
  cells: readonly string[],
  row: number,
  header: readonly string[],
  columns: readonly HistoryColumn[],
  quantities: QuantityBook,
): ReadRow {
  const refused: HistoryRefusal[] = [];
  const refuse = (index: number, reason: string) =>
    refused.push({ row, column: header[index] ?? '', text: cells[index]?.trim() ?? '', reason });
  const at = (meaning: string) => columns.findIndex((column) => column.meaning === meaning);
  const serialAt = at('serial');
  const serial = readTypedSerial(cells[serialAt] ?? '');
  if (!serial.ok) {
    refuse(serialAt, serialAt < 0 ? 'No column holds the serial number.' : serial.reason);
    return { sheet: null, refused };
  }
  const dateAt = at('date');
  const date = readDay(cells[dateAt] ?? '');
  if (!date.ok) {
    refuse(dateAt, date.reason);
    return { sheet: null, refused };
  }
  const readings = columns.flatMap(({ meaning, band, unit }, index): HistoryReading[] => {
    const quantity = quantities.get(meaning);
    const text = (cells[index] ?? '').trim();
    if (quantity === undefined || isBlank(text)) return [];
    if (text.length > longestText) {
      refuse(index, `A cell has at most ${String(longestText)} characters.`);
      return [];
    }
    const value = parseEntry(
      text,
      { ...quantity, formula: null },
      { confirmed: true, ...(unit === '' ? {} : { columnUnit: unit }) },
    );
    if (!value.ok) {
      refuse(index, value.reason);
      return [];
    }
    return [
      {
        quantityKey: quantity.key,
        band: BAND_KEYS.find((key) => key === band) ?? null,
        enteredText: text,
        enteredUnit: value.enteredUnit,
        value: value.value,
      },
    ];
  });
  if (readings.length === 0) {
    refuse(serialAt, 'The row holds no reading.');
    return { sheet: null, refused };
  }
  return { sheet: { row, serial: serial.serial, testedOn: date.day, readings }, refused };
}

/** How people write that there is nothing. */
function isBlank(text: string): boolean {
  return /^(|[-\u2013\u2014\u2212]+|n\.?\/?a\.?|\?)$/i.test(text);
}

/** A day as 2027-03-09 or 9.3.2027; one with slashes only where it can be read in one way. */
export function readDay(text: string): { ok: true; day: string | null } | { ok: false; reason: string } {
  const plain = text.trim();
  if (isBlank(plain)) return { ok: true, day: null };
  const iso = /^(\d{4})-(\d{1,2})-(\d{1,2})$/.exec(plain);
  if (iso !== null) return dayOf(plain, iso[1], iso[2], iso[3]);
  const points = /^(\d{1,2})\.(\d{1,2})\.(\d{4})$/.exec(plain);
  if (points !== null) return dayOf(plain, points[3], points[2], points[1]);
  const slashes = /^(\d{1,2})\/(\d{1,2})\/(\d{4})$/.exec(plain);
  if (slashes === null) return { ok: false, reason: 'Write the day as 2027-03-09.' };
  const [, a = '', b = '', year] = slashes;
  if (Number(a) > 12) return dayOf(plain, year, b, a);
  if (Number(b) > 12 || a === b) return dayOf(plain, year, a, b);
  return { ok: false, reason: `“${plain}” can be two days. Write it as 2027-03-09.` };
}

function dayOf(text: string, year = '', month = '', day = ''): ReturnType<typeof readDay> {
  const iso = `${year}-${month.padStart(2, '0')}-${day.padStart(2, '0')}`;
  const date = new Date(`${iso}T00:00:00Z`);
  const isDay = !Number.isNaN(date.getTime()) && date.toISOString().startsWith(iso);
  return isDay ? { ok: true, day: iso } : { ok: false, reason: `“${text}” is no day of the calendar.` };
}
