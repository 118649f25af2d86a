import type { StatedPoint } from '~/domain/certificates/statement';
import type { Cell, Table } from './table';
import { leastWidth } from './table';
import type { PrintedVerdict } from './verdict-mark';

type BandRow = { band: string; freqHz: number | null; points: Map<string, StatedPoint> };
type Column = { key: string; heading: string; points: (StatedPoint | undefined)[] };

const SEVERITY: readonly PrintedVerdict[] = ['not_run', 'pass', 'concession', 'too_close', 'fail'];

/** A point as it is printed: a concession is said, and never shown as a pass. */
export function printedVerdict(point: StatedPoint): PrintedVerdict {
  return point.concession !== null && point.verdict !== 'pass' ? 'concession' : point.verdict;
}

function worst(points: readonly StatedPoint[]): PrintedVerdict {
  const found = Math.max(0, ...points.map((point) => SEVERITY.indexOf(printedVerdict(point))));
  return SEVERITY[found] ?? 'not_run';
}

/** A carrier in MHz to 10 Hz, in groups that the eye can count: `7.030 04`. */
function formatCarrier(freqHz: number): string {
  const [whole = '', part = ''] = (freqHz / 1e6).toFixed(5).split('.');
  return `${whole}.${part.slice(0, 3)}\u00a0${part.slice(3)}`;
}

/** Short words of a first column stay on one line. */
function unbroken(text: string): string {
  return text.length > 12 ? text : text.replaceAll(' ', '\u00a0');
}

function formatK(k: number): string {
  return Number.isInteger(Math.round(k * 100) / 100) ? k.toFixed(0) : k.toFixed(2);
}

const allSame = (values: readonly unknown[]): boolean => values.every((value) => value === values[0]);

/** What a whole column shares stands in a row under it, what differs from band to band beside the value. */
function sharedLimit({ points }: Column): string | undefined {
  const limits = points.flatMap((point) => (point ? [point.limitText] : []));
  return allSame(limits) ? limits[0] : undefined;
}

function uncertaintyText(point: StatedPoint, commonK: string | undefined): string {
  if (!point.uncertainty) return '';
  const { text, k } = point.uncertainty;
  return commonK === undefined ? `${text}, k = ${formatK(k)}` : text;
}

function valueCell(point: StatedPoint | undefined, ownUncertainty: string, unit?: string): Cell {
  if (!point) return null;
  const under = [
    ...(point.n > 1 ? [`mean of ${point.n}`] : []),
    ...(ownUncertainty === '' ? [] : [`± ${ownUncertainty}`]),
  ];
  return { text: withoutUnit(point.text, unit), under };
}

/** @param leastUnit letters of a unit that moves from the values into the heading: 3, or 1 where room is short */
function bandTable(rows: readonly BandRow[], columns: readonly Column[], leastUnit = 3): Table {
  const points = columns.flatMap((column) => column.points.filter((point) => point !== undefined));
  const factors = points.flatMap((point) => (point.uncertainty ? [formatK(point.uncertainty.k)] : []));
  const commonK = factors.length > 0 && allSame(factors) ? factors[0] : undefined;
  const table: Table = {
    columns: [
      { heading: 'Band', align: 'start', prose: true },
      { heading: 'Carrier, MHz', align: 'end', prose: false },
    ],
    rows: rows.map(({ band, freqHz }) => ({
      quiet: false,
      cells: [{ text: unbroken(band) }, freqHz === null ? null : { text: formatCarrier(freqHz) }],
    })),
  };
  const mustBe: Cell[] = [{ text: unbroken('must be') }, null];
  const spread: Cell[] = [{ text: commonK === undefined ? '±' : unbroken(`±, k = ${commonK}`) }, null];

  columns.forEach((column, index) => {
    const limit = sharedLimit(column);
    const texts = column.points.flatMap((point) => (point ? [uncertaintyText(point, commonK)] : []));
    const shared = allSame(texts) ? (texts[0] ?? '') : undefined;
    const unit = unitForHeading(
      column.points.flatMap((point) => (point ? [point.text] : [])),
      leastUnit,
    );
    table.columns.push({ heading: withUnit(column.heading, unit), align: 'end', prose: false });
    table.rows.forEach((row, at) => {
      const point = column.points[at];
      row.cells.push(
        valueCell(point, point && shared === undefined ? uncertaintyText(point, commonK) : '', unit),
      );
    });
    mustBe.push(limit === undefined || limit === '' ? null : { text: withoutUnit(limit, unit) });
    spread.push(shared === undefined || shared === '' ? null : { text: withoutUnit(shared, unit) });
    const next = columns[index + 1];
    if (limit === undefined && !(next && sameLimits(column, next))) {
      const limits = column.points.flatMap((point) =>
        point && point.limitText !== '' ? [point.limitText] : [],
      );
      const limitUnit = unitForHeading(limits, leastUnit);
      table.columns.push({ heading: withUnit('Allowed', limitUnit), align: 'end', prose: false });
      table.rows.forEach((row, at) => {
        const text = column.points[at]?.limitText ?? '';
        row.cells.push(text === '' ? null : { text: withoutUnit(text, limitUnit) });
      });
      mustBe.push(null);
      spread.push(null);
    }
  });

  table.columns.push({ heading: 'Result', align: 'start', prose: true });
  table.rows.forEach((row, at) => {
    const judged = columns.flatMap(({ points: own }) => own[at] ?? []);
    row.cells.push(judged.length === 0 ? null : { verdict: worst(judged) });
  });
  for (const cells of [mustBe, spread]) {
    if (cells.slice(1).some((cell) => cell !== null))
      table.rows.push({ quiet: true, cells: [...cells, null] });
  }
  return table;
}

/** A long unit that a whole column shares stands in its heading, which leaves room for one more quantity. */
function unitForHeading(texts: readonly string[], leastLetters: number): string | undefined {
  const units = texts.map((text) => /[\s\u00a0]([\p{L}Ω°%]+)$/u.exec(text)?.[1]);
  const [unit] = units;
  return unit !== undefined && allSame(units) && unit.length >= leastLetters ? unit : undefined;
}

function withUnit(heading: string, unit: string | undefined): string {
  return unit === undefined ? heading : `${heading}, ${unit}`;
}

/** A value whose unit stands in the heading; one in another unit, such as an uncertainty in dB, keeps its own. */
function withoutUnit(text: string, unit: string | undefined): string {
  const isSaid =
    unit !== undefined && /[\s\u00a0]$/u.test(text.slice(0, -unit.length)) && text.endsWith(unit);
  return isSaid ? text.slice(0, -unit.length).trimEnd() : text;
}

/** Whether two columns are held, band by band, to the same limits, so that one column of limits serves both. */
function sameLimits(a: Column, b: Column): boolean {
  return a.points.every((point, at) => point?.limitText === b.points[at]?.limitText);
}

/** Columns in as few tables as the width allows, each table with its own result. */
function chunked(rows: readonly BandRow[], columns: readonly Column[], width: number): Table[] {
  if (columns.length === 0) return [];
  for (const leastUnit of [3, 1]) {
    const whole = bandTable(rows, columns, leastUnit);
    if (leastWidth(whole) <= width) return [whole];
  }
  const tables: Table[] = [];
  let chunk: Column[] = [];
  for (const column of columns) {
    if (chunk.length > 0 && leastWidth(bandTable(rows, [...chunk, column])) > width) {
      tables.push(bandTable(rows, chunk));
      chunk = [];
    }
    chunk.push(column);
  }
  return chunk.length > 0 ? [...tables, bandTable(rows, chunk)] : tables;
}

function singleTable(points: readonly StatedPoint[]): Table {
  return {
    columns: [
      { heading: 'Whole unit', align: 'start', prose: true },
      { heading: 'Reading', align: 'end', prose: false },
      { heading: 'Must be', align: 'end', prose: false },
      { heading: '±', align: 'end', prose: false },
      { heading: 'Result', align: 'start', prose: true },
    ],
    rows: points.map((point) => ({
      quiet: false,
      cells: [
        { text: point.band === null ? point.label : `${point.label}, ${point.band}` },
        valueCell(point, ''),
        { text: point.limitText },
        { text: uncertaintyText(point, undefined) },
        { verdict: printedVerdict(point) },
      ],
    })),
  };
}

/**
 * The readings as tables no wider than `width` points: one row a band and carrier, one column a quantity, in the order
 * in which the points come; points without a band, and a second point of one quantity at one carrier, in a list below.
 */
export function readingTables(points: readonly StatedPoint[], width: number): Table[] {
  const rows = new Map<string, BandRow>();
  const headings = new Map<string, string>();
  const single: StatedPoint[] = [];
  for (const point of points) {
    const at = `${point.band}|${point.freqHz}`;
    const row = rows.get(at);
    if (point.band === null || row?.points.has(point.quantityKey)) {
      single.push(point);
      continue;
    }
    if (!headings.has(point.quantityKey)) headings.set(point.quantityKey, point.label);
    if (row) row.points.set(point.quantityKey, point);
    else
      rows.set(at, { band: point.band, freqHz: point.freqHz, points: new Map([[point.quantityKey, point]]) });
  }
  const bandRows = [...rows.values()];
  const columns = [...headings].map(([key, heading]) => ({
    key,
    heading,
    points: bandRows.map((row) => row.points.get(key)),
  }));
  const tables = chunked(bandRows, columns, width);
  return single.length > 0 ? [...tables, singleTable(single)] : tables;
}

const NUMBER_OF_DB = /\d+(?:\.\d+)?(?= dB)/u;

/** `at least 49.6 to 50.0 dB below …` for texts that differ in that number alone. */
function rangeOf(texts: readonly string[]): string {
  const numbers = texts.map((text) => NUMBER_OF_DB.exec(text)?.[0] ?? '');
  const sorted = [...new Set(numbers)].sort((a, b) => Number(a) - Number(b));
  const [first = ''] = texts;
  return sorted.length < 2 ? first : first.replace(NUMBER_OF_DB, `${sorted[0]} to ${sorted.at(-1)}`);
}

/** Which limits hold and how they are decided, one sentence for each rule, so that no verdict stands without its rule. */
export function ruleSentences(points: readonly StatedPoint[]): string[] {
  const groups = new Map<string, { labels: Set<string>; texts: Set<string>; how: string }>();
  for (const point of points) {
    if (point.limitText === '') continue;
    const how = point.decision === 'guarded' ? 'guarded (w = U)' : 'as read (w = 0)';
    const key = `${point.ruleText.replace(NUMBER_OF_DB, '#')}, ${how}`;
    const group = groups.get(key) ?? { labels: new Set(), texts: new Set(), how };
    group.labels.add(point.label);
    group.texts.add(point.ruleText);
    groups.set(key, group);
  }
  return [...groups.values()].map(
    ({ labels, texts, how }) => `${[...labels].join('; ')}: ${rangeOf([...texts])}, ${how}.`,
  );
}
