import { COLOURS } from './colours';
import type { Flow } from './flow';
import { lineHeight, style, wrapSpans, wrapText } from './text-layout';
import type { Span } from './text-layout';

const LABEL = style('text', 9.6, COLOURS.quiet);
const FACT = style('text', 9.6);
const LABEL_WIDTHS = [54, 76] as const;
const COLUMN_GAP = 18;

/** Name and address of the works on the left, what the paper is and its number on the right. */
export function drawHead(
  flow: Flow,
  works: { name: string; addressLines: readonly string[] },
  kind: string,
  number: string,
): void {
  const { sheet } = flow;
  const right = flow.sheet.width - flow.sheet.margin;
  const numberStyle = style('monoStrong', 13);
  const numbers = wrapText(number, numberStyle, 190);
  sheet.lines(wrapText(kind, style('text', 9.6, COLOURS.quiet), 190), right, flow.y - 5, 'end');
  const under = sheet.lines(numbers, right, flow.y + 9, 'end');
  let y = sheet.lines(
    wrapText(works.name, style('heading', 12.5), flow.sheet.contentWidth - 210),
    flow.sheet.margin,
    flow.y - 7,
  );
  y = sheet.lines(
    wrapText(works.addressLines.join(', '), style('text', 9.4, COLOURS.quiet), flow.sheet.contentWidth - 210),
    flow.sheet.margin,
    y,
  );
  flow.y = Math.max(y, under);
}

/** The head of a page after the first, short. */
export function drawShortHead(flow: Flow, worksName: string, number: string): void {
  const quiet = style('text', 9, COLOURS.quiet);
  const right = flow.sheet.width - flow.sheet.margin;
  const end = flow.sheet.lines(
    wrapText(`${number}, continued`, style('mono', 9), 200),
    right,
    flow.y - 6,
    'end',
  );
  flow.y =
    Math.max(end, flow.sheet.lines(wrapText(worksName, quiet, 300), flow.sheet.margin, flow.y - 6)) + 10;
}

/** A large title with a line under it. */
export function drawTitle(flow: Flow, title: string, under: string): void {
  flow.y += 14;
  flow.y = flow.sheet.lines(
    wrapText(title, style('heading', 28), flow.sheet.contentWidth),
    flow.sheet.margin,
    flow.y,
  );
  flow.y =
    flow.sheet.lines(wrapText(under, style('text', 11), flow.sheet.contentWidth), flow.sheet.margin, flow.y) +
    12;
}

/** Facts with their names in two columns, filled row by row; a fact without text is left out. */
export function drawFacts(flow: Flow, facts: readonly (readonly [name: string, text: string])[]): void {
  const columnWidth = (flow.sheet.contentWidth - COLUMN_GAP) / 2;
  const said = facts.filter(([, text]) => text !== '');
  for (let at = 0; at < said.length; at += 2) {
    const pair = said.slice(at, at + 2).map(([name, text], column) => {
      const indent = LABEL_WIDTHS[column] ?? 0;
      return {
        indent,
        name: wrapText(name, LABEL, indent - 4),
        text: wrapText(text, FACT, columnWidth - indent),
      };
    });
    const height =
      Math.max(...pair.map(({ name, text }) => Math.max(name.length, text.length))) * lineHeight(FACT);
    flow.need(height);
    pair.forEach(({ indent, name, text }, column) => {
      const x = flow.sheet.margin + column * (columnWidth + COLUMN_GAP);
      flow.sheet.lines(name, x, flow.y);
      flow.sheet.lines(text, x + indent, flow.y);
    });
    flow.y += height + 2.4;
  }
}

/** A paragraph over the whole width, broken over pages line by line; nothing for an empty one. */
export function drawParagraph(flow: Flow, spans: readonly Span[], gap: number): void {
  const lines = wrapSpans(spans, flow.sheet.contentWidth);
  for (const line of lines) {
    const height = Math.max(...line.spans.map((span) => lineHeight(span.style)));
    flow.need(height);
    flow.y = flow.sheet.lines([line], flow.sheet.margin, flow.y);
  }
  if (lines.length > 0) flow.y += gap;
}
