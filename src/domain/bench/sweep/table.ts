import { commonWidth, numberCell, splitLine } from './cells';
import type { Dialect } from './cells';

/** A block of numeric rows with the lines before it. */
export interface Table {
  dialect: Dialect;
  width: number;
  /** Cells of each row. */
  rows: string[][];
  /** Line number in the file of each row, from 1. */
  lineNumbers: number[];
  /** Cells of the line of column names; null where there is none. */
  heading: string[] | null;
  /** The line above the points, whether or not its cells name the columns; null where there is none. */
  headingLine: string | null;
  preamble: string[];
  /** How many blocks of about this size the file holds. */
  blocks: number;
}

type TableResult = { ok: true; table: Table } | { ok: false; reason: string };

interface Block {
  rows: string[][];
  lineNumbers: number[];
}

interface Classified {
  cells: string[];
  blank: boolean;
  numeric: boolean;
  /** Cells that are numbers. */
  numbers: number;
}

function classify(line: string, dialect: Dialect, width: number): Classified {
  const cells = splitLine(line, dialect);
  let numbers = 0;
  for (const cell of cells) if (numberCell(cell, dialect.decimal) !== null) numbers += 1;
  return { cells, blank: line.trim() === '', numbers, numeric: cells.length === width && numbers === width };
}

/** A line inside the points that should have been a row; not a title between two traces. */
function brokenRow(line: Classified, before: boolean, after: boolean, dialect: Dialect): boolean {
  if (line.blank || line.numeric) return false;
  return (
    (before && after) || (line.cells.length > 1 && numberCell(line.cells[0] ?? '', dialect.decimal) !== null)
  );
}

function describe(line: Classified, width: number, dialect: Dialect): string {
  const bad = line.cells.find((cell) => numberCell(cell, dialect.decimal) === null);
  if (bad === undefined || line.cells.length !== width) {
    return `has ${String(line.cells.length)} cells where the others have ${String(width)}`;
  }
  return bad === '' ? 'has an empty cell' : `has “${bad.slice(0, 30)}” where a number should be`;
}

/**
 * Names of the columns from the line above the points: as many cells as the rows have, none of them a number,
 * or all but the first (the frequencies of a matrix). Between blanks a name may itself hold a blank.
 */
function headingCells(line: string, width: number, dialect: Dialect): string[] | null {
  const bare = line.replace(/^\s*[#!%;*]+\s*/, '');
  const splits = [splitLine(bare, dialect), bare.trim().split(/\t|\s{2,}/)];
  for (const cells of dialect.separator === 'blank' ? splits : splits.slice(0, 1)) {
    if (cells.length < width || (dialect.separator === 'blank' && cells.length !== width)) continue;
    const numbers = cells.filter((cell) => numberCell(cell, dialect.decimal) !== null).length;
    const isMatrix = numbers === cells.length - 1 && numberCell(cells[0] ?? '', dialect.decimal) === null;
    if (numbers === 0 || (isMatrix && numbers > 1)) return cells;
  }
  return null;
}

/**
 * Finds the rows of numbers in a file. Refuses where a row inside them is not one: a sweep with a hole is no
 * sweep. @param lines the whole file
 */
export function findTable(
  lines: readonly string[],
  sample: readonly string[],
  dialect: Dialect,
): TableResult {
  const { width } = commonWidth(
    sample.map((line) => splitLine(line, dialect)),
    dialect.decimal,
  );
  const classified = lines.map((line) => classify(line, dialect, width));
  const first = classified.findIndex((line) => line.numeric);
  const last = classified.findLastIndex((line) => line.numeric);
  const filled = classified.map((_, index) => index).filter((index) => classified[index]?.blank === false);
  const blocks: Block[] = [];
  let open: Block | null = null;
  for (const [place, index] of filled.entries()) {
    const line = classified[index];
    if (line === undefined) continue;
    if (line.numeric) {
      if (open === null) {
        open = { rows: [], lineNumbers: [] };
        blocks.push(open);
      }
      open.rows.push(line.cells);
      open.lineNumbers.push(index + 1);
      continue;
    }
    open = null;
    if (index < first || index > last) continue;
    const before = classified[filled[place - 1] ?? -1]?.numeric === true;
    const after = classified[filled[place + 1] ?? -1]?.numeric === true;
    if (brokenRow(line, before, after, dialect)) {
      return { ok: false, reason: `Line ${String(index + 1)} ${describe(line, width, dialect)}.` };
    }
  }
  let main: Block | null = null;
  for (const block of blocks) if (main === null || block.rows.length > main.rows.length) main = block;
  if (main === null) return { ok: false, reason: 'The file has no rows of numbers.' };

  const start = (main.lineNumbers[0] ?? 1) - 1;
  let headingAt = start - 1;
  while (headingAt >= 0 && classified[headingAt]?.blank === true) headingAt -= 1;
  const headingLine = lines[headingAt] ?? null;
  const heading = headingLine === null ? null : headingCells(headingLine, width, dialect);
  const size = main.rows.length;
  return {
    ok: true,
    table: {
      dialect,
      width,
      rows: main.rows,
      lineNumbers: main.lineNumbers,
      heading,
      headingLine,
      preamble: lines.slice(0, heading === null ? start : headingAt),
      blocks: blocks.filter((block) => block.rows.length > 2 && block.rows.length >= size / 2).length,
    },
  };
}
