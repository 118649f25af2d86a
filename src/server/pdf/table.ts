import { COLOURS } from './colours';
import type { Colour } from './colours';
import type { Flow } from './flow';
import { lineHeight, style, textWidth, wrapText } from './text-layout';
import type { Line, Style } from './text-layout';
import { drawVerdict, MARK_ADVANCE, verdictWord } from './verdict-mark';
import type { PrintedVerdict } from './verdict-mark';

/** What stands in one cell: a value with quiet lines under it, or a verdict with its mark. */
export type Cell = { text: string; under?: string[] } | { verdict: PrintedVerdict } | null;
type TableRow = { cells: Cell[]; quiet: boolean };
export type Table = {
  columns: { heading: string; align: 'start' | 'end'; prose: boolean }[];
  rows: TableRow[];
};

const GAP = 9;
const INSET = 6;
const HEAD = style('strong', 8.6, COLOURS.quiet);
const VALUE = style('mono', 8.9);
const PROSE = style('text', 9.6);
const QUIET_VALUE = style('mono', 8.5, COLOURS.quiet);
const QUIET_PROSE = style('text', 9, COLOURS.quiet);
const UNDER = style('text', 7.9, COLOURS.quiet);
const VERDICT_SIZE = 9.6;

function cellStyle(prose: boolean, quiet: boolean): Style {
  if (prose) return quiet ? QUIET_PROSE : PROSE;
  return quiet ? QUIET_VALUE : VALUE;
}

function longestWord(text: string, textStyle: Style): number {
  return Math.max(0, ...text.split(' ').map((word) => textWidth(word, textStyle)));
}

/** The narrowest in which a heading takes no more than two lines. */
function twoLineWidth(heading: string): number {
  const words = heading.split(' ');
  const splits = words.map((_, at) =>
    Math.max(
      textWidth(words.slice(0, at + 1).join(' '), HEAD),
      textWidth(words.slice(at + 1).join(' '), HEAD),
    ),
  );
  return Math.min(...splits);
}

/** Widths that the contents ask for, and below which they would have to break words. */
function naturalWidths(table: Table): { wanted: number[]; least: number[] } {
  const wanted: number[] = [];
  const least: number[] = [];
  table.columns.forEach(({ heading, prose }, index) => {
    let widest = twoLineWidth(heading);
    let narrowest = longestWord(heading, HEAD);
    for (const row of table.rows) {
      const cell = row.cells[index] ?? null;
      if (cell === null) continue;
      if ('verdict' in cell) {
        const width = MARK_ADVANCE + textWidth(verdictWord(cell.verdict), style('strong', VERDICT_SIZE));
        widest = Math.max(widest, width);
        narrowest = Math.max(narrowest, width);
        continue;
      }
      const cellFont = cellStyle(prose, row.quiet);
      const under = (cell.under ?? []).map((line) => textWidth(line, UNDER));
      widest = Math.max(widest, textWidth(cell.text, cellFont), ...under);
      narrowest = Math.max(
        narrowest,
        prose ? longestWord(cell.text, cellFont) : textWidth(cell.text, cellFont),
      );
    }
    wanted.push(widest);
    least.push(narrowest);
  });
  return { wanted, least };
}

const sum = (numbers: readonly number[]): number => numbers.reduce((all, number) => all + number, 0);

/** The narrowest in which the table can stand without breaking a value, in points. */
export function leastWidth(table: Table): number {
  return sum(naturalWidths(table).least) + GAP * (table.columns.length - 1) + 2 * INSET;
}

/** Takes what is too much from the widest columns alone: a narrow one, such as a verdict's, keeps its width. */
function cappedTo(widths: readonly number[], room: number): number[] {
  let cap = room / widths.length;
  for (;;) {
    const narrow = widths.filter((width) => width <= cap);
    const next = (room - sum(narrow)) / (widths.length - narrow.length);
    if (!(next > cap)) return widths.map((width) => Math.min(width, cap));
    cap = next;
  }
}

/** Widths that fill the page: spare room is spread evenly, missing room is taken from where words can be wrapped. */
function columnWidths(table: Table, width: number): number[] {
  const { wanted, least } = naturalWidths(table);
  const room = width - 2 * INSET - GAP * (wanted.length - 1);
  const spare = room - sum(wanted);
  if (spare >= 0) return wanted.map((width) => width + spare / wanted.length);
  const give = wanted.map((width, index) => width - (least[index] ?? width));
  const missing = -spare;
  if (sum(give) >= missing)
    return wanted.map((width, index) => width - (missing * (give[index] ?? 0)) / sum(give));
  return cappedTo(least, room);
}

const tall = (lines: readonly Line[]): number =>
  sum(lines.map((line) => Math.max(...line.spans.map((span) => lineHeight(span.style)))));

/** Draws a table across the page, its head again on each further page. Rows are never torn apart. */
export function drawTable(flow: Flow, table: Table): void {
  const widths = columnWidths(table, flow.sheet.contentWidth);
  const lefts: number[] = [];
  let at = flow.sheet.margin + INSET;
  for (const width of widths) {
    lefts.push(at);
    at += width + GAP;
  }
  const put = (lines: readonly Line[], column: number, y: number): number => {
    const { align } = table.columns[column] ?? { align: 'start' };
    const left = lefts[column] ?? 0;
    return flow.sheet.lines(lines, align === 'end' ? left + (widths[column] ?? 0) : left, y, align);
  };

  const heads = table.columns.map(({ heading }, column) =>
    wrapText(heading, HEAD, (widths[column] ?? 0) + 0.5),
  );
  const headHeight = Math.max(...heads.map(tall)) + 6;
  const { sheet } = flow;
  const drawHead = () => {
    sheet.as('TR', () => {
      heads.forEach((lines, column) => {
        const y = flow.y + headHeight - 6 - tall(lines);
        sheet.as('TH', () => put(lines, column, y), { scope: 'Column' });
      });
    });
    flow.y += headHeight;
    drawRule(flow, COLOURS.ink, 1.2);
  };

  const laidRows = table.rows.map((row) => {
    const cells = row.cells.map((cell, column) => {
      if (cell === null || 'verdict' in cell) return { cell, lines: [] };
      const width = (widths[column] ?? 0) + 0.5;
      const { prose } = table.columns[column] ?? { prose: true };
      const under = (cell.under ?? []).flatMap((text) => wrapText(text, UNDER, width));
      const lines = [...wrapText(cell.text, cellStyle(prose, row.quiet), width), ...under];
      // What stands under a value is read after a blank, as the next line of a paragraph is.
      return { cell, lines: lines.map((line, at) => ({ ...line, isBroken: at < lines.length - 1 })) };
    });
    const pad = padOf(row, flow);
    return { cells, pad, height: Math.max(13, ...cells.map(({ lines }) => tall(lines))) + pad };
  });

  flow.need(headHeight + (laidRows[0]?.height ?? 0));
  sheet.as('Table', () => {
    drawHead();
    for (const { cells, pad, height } of laidRows) {
      if (flow.need(height)) sheet.decoration(drawHead);
      const y = flow.y + pad / 2;
      sheet.as('TR', () => {
        cells.forEach(({ cell, lines }, column) => {
          const draw = () => {
            if (cell !== null && 'verdict' in cell) {
              drawVerdict(sheet, cell.verdict, lefts[column] ?? 0, y + 10, VERDICT_SIZE);
            } else {
              put(lines, column, y);
            }
          };
          if (column === 0) sheet.as('TH', draw, { scope: 'Row' });
          else sheet.as('TD', draw);
        });
      });
      flow.y += height;
      drawRule(flow, COLOURS.rule, 0.6);
    }
  });
}

function padOf({ quiet }: TableRow, { isDense }: Flow): number {
  if (isDense) return quiet ? 5 : 6;
  return quiet ? 7 : 11;
}

function drawRule({ sheet, y }: Flow, colour: Colour, lineWidth: number): void {
  sheet.line([sheet.margin, y], [sheet.margin + sheet.contentWidth, y], colour, lineWidth);
}
