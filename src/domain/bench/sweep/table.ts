import { commonWidth, numberCell, splitLine } from './cells';
import type { Dialect } from './cells';
import { RowStore } from './row-store';
import type { StoredRows } from './row-store';
import { rowScanner } from './scan-rows';
import type { ScannedRow } from './scan-rows';

/** A block of numeric rows with the lines before it. */
export interface Table extends StoredRows {
  dialect: Dialect;
  width: number;
  /** Its first rows as they stand in the file. */
  firstLines: string[];
  /** Cells of the line of column names; null where there is none. */
  heading: string[] | null;
  /** The line above the points, whether or not its cells name the columns; null where there is none. */
  headingLine: string | null;
  preamble: string[];
  /** How many blocks of about this size the file holds. */
  blocks: number;
}

type TableResult = { ok: true; table: Table } | { ok: false; reason: string };

/** A line that is no row of numbers. */
interface OtherLine {
  number: number;
  cells: string[];
  /** A row stood right before it, blank lines apart. */
  followsRow: boolean;
}

/** How instruments write that they have no number. */
const NO_NUMBER = /^[+-]?(?:nan|inf(?:inity)?|1\.#\w+|n\/?a|null|overload|[-*#]+)?$/i;
/** So many rows are looked at to see in which steps a column is written. */
const FIRST_ROWS = 64;

const isNumber = (cell: string | undefined, { decimal }: Dialect): boolean =>
  numberCell(cell ?? '', decimal) !== null;

/**
 * Names of the columns from the line above the points: as many cells as the rows have, none of them a number,
 * or all but the first (the frequencies of a matrix). Between blanks a name may itself hold a blank.
 */
function headingCells(line: string, width: number, dialect: Dialect): string[] | null {
  const bare = line.replace(/^\s*[#!%;*]+\s*/, '');
  const splits = [splitLine(bare, dialect), bare.trim().split(/\t|\s{2,}/)];
  for (const cells of dialect.separator === 'blank' ? splits : splits.slice(0, 1)) {
    if (cells.length < width || (dialect.separator === 'blank' && cells.length !== width)) continue;
    const numbers = cells.filter((cell) => isNumber(cell, dialect)).length;
    const isMatrix = numbers === cells.length - 1 && !isNumber(cells[0], dialect);
    if (numbers === 0 || (isMatrix && numbers > 1)) return cells;
  }
  return null;
}

/** Takes the lines of a file one by one and keeps its rows of numbers, block by block. */
class TableFinder {
  readonly store: RowStore;
  /** Where each block begins in the text. */
  readonly starts: number[] = [];
  readonly #scan: ReturnType<typeof rowScanner>;
  readonly #row: ScannedRow;
  #lineNo = 0;
  #isOpen = false;
  #lastFirst = NaN;
  #openedWith = NaN;
  /** The last line that was no row. */
  #other: OtherLine | null = null;
  /** The first line among the rows that begins like one: a hole, once another row follows. */
  #suspect: OtherLine | null = null;

  constructor(
    private readonly text: string,
    private readonly dialect: Dialect,
    private readonly width: number,
  ) {
    this.store = new RowStore(width);
    this.#scan = rowScanner(text, dialect, width);
    this.#row = { values: new Float64Array(width), units: new Array<string>(width).fill('') };
  }

  /** Takes the line at a place of the text; answers with a sentence where it shows that a row is broken. */
  take(start: number, end: number): string | null {
    this.#lineNo += 1;
    if (this.#scan(start, end, this.#row)) return this.#takeRow(start);
    const line = this.text.slice(start, end);
    if (line.trim() === '') return null;
    const cells = splitLine(line, this.dialect);
    if (this.#fillRow(cells)) return this.#takeRow(start);
    this.#other = { number: this.#lineNo, cells, followsRow: this.#isOpen };
    if (this.starts.length > 0 && cells.length > 1 && isNumber(cells[0], this.dialect)) {
      this.#suspect ??= this.#other;
    }
    this.#isOpen = false;
    return null;
  }

  /** A sentence where the file ends with a row that is none. */
  end(): string | null {
    if (this.#isOpen || this.#other === null || !this.#other.followsRow) return null;
    const { cells } = this.#other;
    const isCutOff = cells.length < this.width && isNumber(cells[0], this.dialect);
    return isCutOff || this.#lacksNumber(cells) ? this.#describe(this.#other) : null;
  }

  #takeRow(start: number): string | null {
    const [first = NaN] = this.#row.values;
    if (!this.#isOpen) {
      const broken = this.#brokenBefore(first);
      if (broken !== null) return this.#describe(broken);
      this.#isOpen = true;
      this.#openedWith = first;
      this.starts.push(start);
      this.store.open();
    }
    this.store.add(this.#row);
    this.#lastFirst = first;
    return null;
  }

  /** The line before a row that begins a block, where it should have been a row itself. */
  #brokenBefore(first: number): OtherLine | null {
    if (this.#suspect !== null) return this.#suspect;
    const other = this.#other;
    if (other === null) return null;
    if (this.starts.length === 0) return this.#lacksNumber(other.cells) ? other : null;
    // The title of another trace, which begins where the one before it began, is no hole.
    const isTitle = first === this.#openedWith && first !== this.#lastFirst;
    return other.followsRow && !isTitle ? other : null;
  }

  #fillRow(cells: readonly string[]): boolean {
    if (cells.length !== this.width) return false;
    for (const [column, cell] of cells.entries()) {
      const number = numberCell(cell, this.dialect.decimal);
      if (number === null) return false;
      this.#row.values[column] = number.value;
      this.#row.units[column] = number.unit;
    }
    return true;
  }

  /** A row in which a number is missing, told from a line of the preamble or from a footer. */
  #lacksNumber(cells: readonly string[]): boolean {
    if (cells.length !== this.width || !isNumber(cells[0], this.dialect)) return false;
    return cells.every((cell) => isNumber(cell, this.dialect) || NO_NUMBER.test(cell));
  }

  #describe({ cells, number }: OtherLine): string {
    const where = `Line ${String(number)}`;
    const bad = cells.find((cell) => !isNumber(cell, this.dialect));
    if (bad === undefined || cells.length !== this.width) {
      const has = cells.length === 1 ? '1 cell' : `${String(cells.length)} cells`;
      return `${where} has ${has} where the others have ${String(this.width)}. Export the trace again, all of it.`;
    }
    const what = bad === '' ? 'an empty cell' : `“${bad.slice(0, 30)}” where a number should be`;
    return `${where} has ${what}. Export the trace again.`;
  }
}

/**
 * Finds the rows of numbers in a text; of several blocks the largest. Refuses where a row inside them is not
 * one: a sweep with a hole is no sweep.
 * @param text the whole file, its lines ended by `\n` or `\r\n`
 * @param sample lines that show how the file is written
 */
export function findTable(text: string, sample: readonly string[], dialect: Dialect): TableResult {
  const { width } = commonWidth(
    sample.map((line) => splitLine(line, dialect)),
    dialect.decimal,
  );
  const finder = new TableFinder(text, dialect, width);
  for (let start = 0; start < text.length;) {
    const newline = text.indexOf('\n', start);
    const lineEnd = newline < 0 ? text.length : newline;
    const isCrLf = lineEnd > start && text.charCodeAt(lineEnd - 1) === 13;
    const reason = finder.take(start, isCrLf ? lineEnd - 1 : lineEnd);
    if (reason !== null) return { ok: false, reason };
    start = lineEnd + 1;
  }
  const reason = finder.end();
  if (reason !== null) return { ok: false, reason };
  const sizes = finder.store.sizes();
  const size = Math.max(0, ...sizes);
  const main = sizes.indexOf(size);
  if (main < 0) return { ok: false, reason: 'The file has no rows of numbers.' };

  const start = finder.starts[main] ?? 0;
  const before = text.slice(0, start).split(/\r?\n/);
  const headingAt = before.findLastIndex((line) => line.trim() !== '');
  const headingLine = before[headingAt] ?? null;
  const heading = headingLine === null ? null : headingCells(headingLine, width, dialect);
  return {
    ok: true,
    table: {
      ...finder.store.block(main),
      dialect,
      width,
      firstLines: linesFrom(text, start, Math.min(FIRST_ROWS, size)),
      heading,
      headingLine,
      preamble: heading === null ? before : before.slice(0, headingAt),
      blocks: sizes.filter((rows) => rows > 2 && rows >= size / 2).length,
    },
  };
}

function linesFrom(text: string, start: number, count: number): string[] {
  const lines: string[] = [];
  for (let at = start; at < text.length && lines.length < count;) {
    const newline = text.indexOf('\n', at);
    const end = newline < 0 ? text.length : newline;
    const line = text.slice(at, end).trim();
    if (line !== '') lines.push(line);
    at = end + 1;
  }
  return lines;
}
