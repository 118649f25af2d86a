import { CsvError, parse } from 'csv-parse/sync';
import type { TableRow } from './component-list';
import { isComponentList, readComponentList } from './component-list';
import type { TextEncoding } from './decode-text';
import { decodeText } from './decode-text';

export interface BomTable {
  encoding: TextEncoding;
  separator: string;
  rows: TableRow[];
  notes: string[];
  questions: string[];
}

const MAX_BYTES = 5 * 1024 * 1024;
const SEPARATORS = ['\t', ';', '|', ','] as const;

/** Cuts a file of unknown encoding and separator into rows of cells. */
export function readBomTable(bytes: Uint8Array): ({ ok: true } & BomTable) | { ok: false; reason: string } {
  if (bytes.length > MAX_BYTES)
    return { ok: false, reason: 'The file is larger than 5 MB; a bill of materials is not.' };
  const decoded = decodeText(bytes);
  if (!decoded.ok) return decoded;
  const { text, encoding } = decoded;
  if (text.trim() === '') return { ok: false, reason: 'The file is empty.' };
  if (isComponentList(text)) return { ok: true, encoding, separator: '|', ...readComponentList(text) };

  const separator = guessSeparator(text);
  if (separator === null) {
    return {
      ok: false,
      reason: 'No columns were found: no comma, semicolon, tab or bar stands in most of the lines.',
    };
  }
  const cut = cutRows(text, separator);
  if (!cut.ok) return cut;
  if (wasSavedTwice(cut.rows)) {
    return {
      ok: false,
      reason:
        'This was a table separated by semicolons that was opened and saved again as one separated by commas: its designators are scattered over cells, and which belong together can no longer be told for certain. Export it again from the schematic editor and bring that file without opening it in between.',
    };
  }
  return { ok: true, encoding, separator, rows: cut.rows, notes: [], questions: [] };
}

/** Cuts text into rows of cells at a separator. */
export function cutRows(
  text: string,
  separator: string,
): { ok: true; rows: TableRow[] } | { ok: false; reason: string } {
  try {
    const lines: number[] = [];
    const records = parse(text, {
      bom: true,
      delimiter: separator,
      on_record: (record, context) => {
        lines.push(context.lines);
        return record;
      },
      // Inch marks stand unescaped in descriptions, and rows end where their last filled cell ends.
      relax_column_count: true,
      relax_quotes: true,
      trim: true,
    });
    return { ok: true, rows: records.map((cells, index) => ({ cells, line: lines[index] ?? 0 })) };
  } catch (error) {
    if (error instanceof CsvError) {
      return {
        ok: false,
        reason: 'A quotation mark is opened and never closed, so that cells cannot be told apart.',
      };
    }
    throw error;
  }
}

/** The separator that stands in the first line and in most others, most often; quoted ones do not count. */
export function guessSeparator(text: string): string | null {
  const lines = text
    .split(/\r\n|\r|\n/)
    .filter((line) => line.trim() !== '')
    .slice(0, 50)
    .map((line) => line.replace(/"(?:[^"]|"")*"/g, ''));
  const candidates = SEPARATORS.map((separator) => {
    const counts = lines.map((line) => line.split(separator).length - 1);
    const filled = counts.filter((count) => count > 0);
    return {
      separator,
      first: counts[0] ?? 0,
      median: filled.sort((a, b) => a - b)[filled.length >> 1] ?? 0,
      share: filled.length / lines.length,
    };
  }).filter(({ share }) => share >= 0.5);
  const best = (key: 'first' | 'median') =>
    candidates.reduce<(typeof candidates)[number] | null>(
      (found, next) => (next[key] > (found?.[key] ?? 0) ? next : found),
      null,
    )?.separator ?? null;
  return best('first') ?? best('median');
}

/** Whole rows of another separator inside the cells of this one. */
function wasSavedTwice(rows: readonly TableRow[]): boolean {
  const filled = rows.filter(({ cells }) => cells.some((cell) => cell !== ''));
  const foreign = filled.filter(({ cells }) =>
    cells.some((cell) => (cell.match(/;"|";/g) ?? []).length >= 2),
  );
  return foreign.length > filled.length / 2;
}
