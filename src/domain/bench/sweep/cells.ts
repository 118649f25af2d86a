import type { Understood } from './types';

/** How cells are parted and numbers written. */
export interface Dialect {
  separator: Understood['separator'];
  decimal: Understood['decimal'];
}

/** A number with the unit glued to it, if any. */
interface NumberCell {
  value: number;
  unit: string;
}

// Ties go to the earlier one.
const DIALECTS: readonly Dialect[] = [
  { separator: 'tab', decimal: '.' },
  { separator: 'tab', decimal: ',' },
  { separator: ';', decimal: '.' },
  { separator: ';', decimal: ',' },
  { separator: ',', decimal: '.' },
  { separator: 'blank', decimal: '.' },
  { separator: 'blank', decimal: ',' },
];

const SPLITTERS: Record<Dialect['separator'], RegExp | string> = {
  tab: '\t',
  ';': ';',
  ',': ',',
  blank: /[ \t\u00a0]+/,
};

/** Cells of a line without quotes and blanks around them; an empty last cell (trailing separator) is dropped. */
export function splitLine(line: string, dialect: Dialect): string[] {
  const source = dialect.separator === 'blank' ? line.trim() : line;
  const cells = source.split(SPLITTERS[dialect.separator]).map((cell) =>
    cell
      .trim()
      .replace(/^"(.*)"$/, '$1')
      .trim(),
  );
  while (cells.length > 1 && cells[cells.length - 1] === '') cells.pop();
  return cells;
}

const POINT_NUMBER = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)\s*([a-zµμ/]*)$/i;
const COMMA_NUMBER = /^([+-]?(?:\d+,?\d*|,\d+)(?:e[+-]?\d+)?)\s*([a-zµμ/]*)$/i;

/** A cell as a finite number with an optional unit; null where it is none. */
export function numberCell(cell: string, decimal: Dialect['decimal']): NumberCell | null {
  const text = cell.replace('\u2212', '-');
  const match = (decimal === '.' ? POINT_NUMBER : COMMA_NUMBER).exec(text);
  if (match === null) return null;
  const value = Number((match[1] ?? '').replace(',', '.'));
  return Number.isFinite(value) ? { value, unit: match[2] ?? '' } : null;
}

/** True where every cell is a number and there are at least two. */
function isNumericRow(cells: readonly string[], decimal: Dialect['decimal']): boolean {
  return cells.length >= 2 && cells.every((cell) => numberCell(cell, decimal) !== null);
}

/** Number of cells that most numeric rows have, with how many rows have it; rows 0 where none is numeric. */
export function commonWidth(
  rows: readonly string[][],
  decimal: Dialect['decimal'],
): { width: number; rows: number } {
  const counts = new Map<number, number>();
  for (const cells of rows) {
    if (isNumericRow(cells, decimal)) counts.set(cells.length, (counts.get(cells.length) ?? 0) + 1);
  }
  let best = { width: 0, rows: 0 };
  for (const [width, count] of counts) if (count > best.rows) best = { width, rows: count };
  return best;
}

/**
 * Dialect in which most of the lines are rows of numbers of one width; null where none gives three.
 * @param lines a sample of the file is enough
 */
export function findDialect(lines: readonly string[]): Dialect | null {
  let best: { dialect: Dialect; rows: number } | null = null;
  for (const dialect of DIALECTS) {
    const { rows } = commonWidth(
      lines.map((line) => splitLine(line, dialect)),
      dialect.decimal,
    );
    if (rows >= 3 && rows > (best?.rows ?? 0)) best = { dialect, rows };
  }
  return best?.dialect ?? null;
}
