import type { TableRow } from './component-list';
import type { TextEncoding } from './decode-text';
import { parseDesignators, prefixOf } from './designators';
import type { BomField, BomMapping } from './mapping';
import { bomFields, guessMapping, isHeadingRow } from './mapping';
import { hintsAtLeftOut, isLeftOutMark, isNo, isYes } from './marks';
import { questionsAbout } from './questions';
import { readBomTable } from './read-table';
import type { PartValue } from './values';
import { parseValue } from './values';

/** A row of somebody's bill of materials, as it was understood. */
export interface ImportedLine {
  /** The line of the file on which the row ends, from 1. */
  fileLine: number;
  designators: string[];
  /** As the file says, or else the number of designators. */
  quantity: number;
  value: string;
  /** The value as a number and its unit; null where it is a type (`2N7002`) or cannot be told. */
  measure: PartValue | null;
  footprint: string;
  description: string;
  partNumber: string;
  /** Left out when the board is populated. */
  dnp: boolean;
}

export interface UnderstoodBom {
  encoding: TextEncoding;
  separator: string;
  /** Null where the file has no row of headings. */
  headings: string[] | null;
  mapping: BomMapping;
  /** All rows under the headings, blank ones and remarks included. */
  rowCount: number;
  /** Designators, and pieces of lines without any; parts left out included. */
  partCount: number;
  /** What was noticed and needs no answer. */
  notes: string[];
}

/**
 * Reads a bill of materials as schematic editors export it. Without a mapping the columns are guessed, which a person
 * then confirms. Contradictions in the file become questions (sentences); the lines stand as the file has them.
 */
export function readBom(
  bytes: Uint8Array,
  mapping?: BomMapping,
):
  | { ok: true; lines: ImportedLine[]; questions: string[]; understood: UnderstoodBom }
  | { ok: false; reason: string } {
  const table = readBomTable(bytes);
  if (!table.ok) return table;

  const head = table.rows.slice(0, 30).findIndex(({ cells }) => isHeadingRow(cells));
  const headings = table.rows[head]?.cells ?? null;
  const below = table.rows.slice(head + 1);
  const guess = guessMapping(
    headings,
    below.map(({ cells }) => cells),
  );
  const used = mapping ?? guess.mapping;
  const body = headings === null && isForeignHeading(below[0], used) ? below.slice(1) : below;
  if (used.designators.length === 0 && used.quantity.length === 0) {
    return {
      ok: false,
      reason:
        'No column of designators (R1, R2) and none of quantities was found. Say which column is which.',
    };
  }

  const rows = body.map((row) => readRow(row, used));
  const read = rows.filter((row) => row !== null);
  if (read.length === 0) return { ok: false, reason: 'No line with a designator or a quantity was found.' };
  const lines = read.map(({ line }) => line);
  const questions = [
    ...(mapping ? [] : questionsOnColumns(headings, guess)),
    ...table.questions,
    ...read.flatMap((row) => row.questions),
    ...questionsAbout(lines),
  ];
  const remarks = body.length - lines.length;
  return {
    ok: true,
    lines,
    questions,
    understood: {
      encoding: table.encoding,
      separator: table.separator,
      headings,
      mapping: used,
      rowCount: body.length,
      partCount: lines.reduce((sum, line) => sum + (line.designators.length || line.quantity), 0),
      notes: [
        ...table.notes,
        ...(remarks > 0
          ? [`${remarks} rows hold no part (blank, totals or remarks) and were passed over.`]
          : []),
        ...(table.encoding === 'Windows-1252'
          ? ['The file is not UTF-8; it was read as Windows-1252 (Latin-1).']
          : []),
      ],
    },
  };
}

function readRow(row: TableRow, mapping: BomMapping): { line: ImportedLine; questions: string[] } | null {
  const first = (field: BomField) =>
    mapping[field].map((column) => blankIfFiller(row.cells[column] ?? '')).find((cell) => cell !== '') ?? '';
  const places = parseDesignators(first('designators'));
  const quantityText = first('quantity');
  if (quantityText === '' && first('designators') === '') return null;

  const designators = places.ok ? places.designators : [];
  const where = `Line ${row.line}${designators[0] ? ` (${shortList(designators)})` : ''}`;
  const questions: string[] = [];
  if (!places.ok) questions.push(`${where}: ${places.reason}. Which places does the line fill?`);
  const said = /^(\d{1,7})(?:[.,]0+)?(?:\s*(?:x|pcs?|st(?:k|ück)?))?\.?$/i.exec(quantityText)?.[1];
  if (quantityText !== '' && said === undefined) {
    questions.push(`${where}: “${quantityText}” is not a quantity. How many are needed?`);
  }
  const value = first('value');
  const markedOut =
    row.cells.some(isLeftOutMark) ||
    mapping.dnp.some((column) => {
      const cell = row.cells[column] ?? '';
      return cell !== '' && !isNo(cell);
    });
  const fitted = first('fitted');
  if (markedOut && isYes(fitted)) {
    questions.push(`${where}: it is marked as left out and ticked as placed. Is it put in?`);
  }
  if (!markedOut && hintsAtLeftOut(value)) {
    questions.push(`${where}: “${value}” may mean that it is left out. Is it put in?`);
  }
  const measure = parseValue(value, prefixOf(designators[0] ?? ''));
  return {
    line: {
      fileLine: row.line,
      designators,
      quantity: said === undefined ? Math.max(1, designators.length) : Number(said),
      value,
      measure: measure.ok ? { value: measure.value, unit: measure.unit, rest: measure.rest } : null,
      footprint: first('footprint'),
      description: first('description'),
      partNumber: first('partNumber'),
      dnp: markedOut || isNo(fitted),
    },
    questions,
  };
}

function questionsOnColumns(
  headings: string[] | null,
  guess: { mapping: BomMapping; guessed: number[] },
): string[] {
  if (guess.guessed.length === 0) return [];
  const names: Record<BomField, string> = {
    designators: 'the designators',
    quantity: 'the quantity',
    value: 'the value',
    footprint: 'the footprint',
    description: 'the description',
    partNumber: 'the part number',
    dnp: 'what is left out',
    fitted: 'what is put in',
  };
  const told = guess.guessed.map((column) => {
    const field = bomFields.find((one) => guess.mapping[one].includes(column));
    const named = headings ? `“${headings[column] ?? ''}”` : `column ${column + 1}`;
    return `${named} as ${field ? names[field] : 'nothing'}`;
  });
  const why = headings ? 'Some columns have no telling name' : 'The file has no row of headings';
  return [`${why}; going by what stands in them, ${told.join(', ')} was taken. Is that right?`];
}

/** A first row of headings in words that are not known: what stands over the designators is none. */
function isForeignHeading(row: TableRow | undefined, { designators }: BomMapping): boolean {
  return designators.some((column) => !parseDesignators(row?.cells[column] ?? '').ok);
}

function blankIfFiller(cell: string): string {
  return /^[~*-]$/.test(cell.trim()) ? '' : cell.trim();
}

function shortList(designators: readonly string[]): string {
  return designators.length <= 3 ? designators.join(', ') : `${designators.slice(0, 3).join(', ')}, …`;
}
