import { parseDesignators, prefixOf } from './designators';
import { isLeftOutMark } from './marks';
import { parseValue } from './values';

export const bomFields = [
  'designators',
  'quantity',
  'value',
  'footprint',
  'description',
  'partNumber',
  'dnp',
  'fitted',
] as const;
export type BomField = (typeof bomFields)[number];

/**
 * Which columns (from 0) hold a field. Where a field has several, the first filled cell of a row counts; for `dnp`, any.
 * `dnp` marks what is left out, `fitted` what is put in.
 */
export type BomMapping = Record<BomField, number[]>;

/** Headings in the order in which they are preferred, in small letters without accents, spaces and signs. */
const HEADINGS: Record<BomField, RegExp[]> = {
  designators: [
    /^(ref(erence)?s?|designators?|refdes|refdesignators?|referencedesignators?|bauteile?|reperes?)$/,
  ],
  quantity: [/^(quantity|qty|qnty|quantite|qte|anzahl|menge|cantidad|count|stuckzahl)/],
  value: [/^(value|val|valeur|wert|valor)$/, /^(designation|comment)$/],
  footprint: [/^(footprint|boitier|gehause|pcbfootprint|huella)$/, /^(package|case|pattern)$/],
  description: [
    /^(description|desc|beschreibung|descripcion)$/,
    /^(notes?|remarks?|details?|bemerkung(en)?)$/,
  ],
  partNumber: [
    /^(mpn|manufacturerpartn(umber|o)|mfr(part)?(number|no)|mfrpn)$/,
    /^(pn|partn(umber|o)|artikelnummer)$/,
    /pn$/,
  ],
  dnp: [/^(dnp|dnf|dni|donot(populate|place|fit)|exclude[d]?frombom)$/],
  fitted: [/^(fitted|placed|populate[d]?|mounted)$/],
};

/** The field that a heading names; a lower rank is preferred. */
function fieldOfHeading(heading: string): { field: BomField; rank: number } | null {
  const bare = heading
    .normalize('NFD')
    .toLowerCase()
    .replace(/[^a-z0-9]/g, '');
  for (const field of bomFields) {
    const rank = HEADINGS[field].findIndex((pattern) => pattern.test(bare));
    if (rank >= 0) return { field, rank };
  }
  return null;
}

/** Whether a row of cells is the row of headings: it names two fields, places or quantities among them. */
export function isHeadingRow(cells: readonly string[]): boolean {
  const fields = new Set(
    cells.map((cell) => fieldOfHeading(cell)?.field).filter((field) => field !== undefined),
  );
  return fields.size >= 2 && (fields.has('designators') || fields.has('quantity'));
}

/**
 * Guesses which column holds what: by its heading, or, where there is none that tells anything (`Field3`, or no
 * headings at all), by what stands in it. `guessed` lists the columns told by content alone.
 */
export function guessMapping(
  headings: readonly string[] | null,
  rows: readonly (readonly string[])[],
): { mapping: BomMapping; guessed: number[] } {
  const mapping: BomMapping = {
    designators: [],
    quantity: [],
    value: [],
    footprint: [],
    description: [],
    partNumber: [],
    dnp: [],
    fitted: [],
  };
  const named = (headings ?? []).flatMap((heading, column) => {
    const found = fieldOfHeading(heading);
    return found ? [{ ...found, column }] : [];
  });
  for (const { field, column } of named.sort((a, b) => a.rank - b.rank || a.column - b.column)) {
    mapping[field].push(column);
  }
  const width = Math.max(0, ...rows.map((row) => row.length));
  const free = new Set(
    Array.from({ length: width }, (_, column) => column).filter((c) => tellsNothing(headings, c)),
  );
  const guessed: number[] = [];
  const sample = rows.slice(0, 300);
  for (const field of bomFields) {
    if (mapping[field].length > 0 && field !== 'dnp') continue;
    const column = bestColumn(field, [...free], sample, mapping);
    if (column === null) continue;
    free.delete(column);
    mapping[field].push(column);
    guessed.push(column);
  }
  return { mapping, guessed };
}

function tellsNothing(headings: readonly string[] | null, column: number): boolean {
  const heading = headings?.[column];
  return (
    headings === null ||
    (heading !== undefined && /^((field|column|unnamed|spalte|champ)[\s:_-]*\d*)?$/i.test(heading.trim()))
  );
}

function bestColumn(
  field: BomField,
  columns: readonly number[],
  rows: readonly (readonly string[])[],
  mapping: BomMapping,
): number | null {
  let best: { column: number; share: number } | null = null;
  for (const column of columns) {
    const filled = rows.filter((row) => (row[column] ?? '') !== '');
    if (filled.length === 0) continue;
    const fits = filled.filter((row) => looksLike(field, row[column] ?? '', row, mapping)).length;
    const share = fits / filled.length;
    if (share >= LEAST_SHARE[field] && share > (best?.share ?? 0)) best = { column, share };
  }
  return best?.column ?? null;
}

const LEAST_SHARE: Record<BomField, number> = {
  designators: 0.8,
  quantity: 0.8,
  value: 0.4,
  footprint: 0.4,
  description: 0.6,
  partNumber: 0.6,
  dnp: 1,
  fitted: 2,
};

function looksLike(field: BomField, cell: string, row: readonly string[], mapping: BomMapping): boolean {
  const places = designatorsIn(row, mapping);
  switch (field) {
    case 'designators':
      return parseDesignators(cell).ok;
    case 'quantity':
      return /^\d{1,5}$/.test(cell) && (places.length === 0 || Number(cell) === places.length);
    case 'value':
      return parseValue(cell, prefixOf(places[0] ?? '')).ok;
    case 'footprint':
      return (
        !/\s/.test(cell) &&
        /(^|[^0-9])(0201|0402|0603|0805|1206|1210|2512)($|[^0-9])|SOT|SOIC|QFN|TSSOP|MSOP|DIP|TO-?92|BGA|DO-?214|SOD/i.test(
          cell,
        )
      );
    case 'description':
      return cell.split(/\s+/).length >= 3;
    case 'partNumber':
      return /^(?=.*\d)(?=.*[A-Za-z])[^\s]{5,}$/.test(cell);
    case 'dnp':
      return isLeftOutMark(cell);
    case 'fitted':
      return false;
  }
}

function designatorsIn(row: readonly string[], mapping: BomMapping): string[] {
  const column = mapping.designators[0];
  const parsed = column === undefined ? null : parseDesignators(row[column] ?? '');
  return parsed?.ok ? parsed.designators : [];
}
