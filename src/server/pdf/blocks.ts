import { COLOURS } from './colours';
import type { Flow } from './flow';
import { lineHeight, style, wrapSpans, wrapText } from './text-layout';
import type { Span, Style } from './text-layout';
import type { Element } from './structure';

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
  const room = flow.sheet.contentWidth - 210;
  const { margin } = sheet;
  let y = sheet.as('P', () =>
    sheet.lines(wrapText(works.name, style('heading', 12.5), room), margin, flow.y - 7),
  );
  y = sheet.as('P', () =>
    sheet.lines(wrapText(works.addressLines.join(', '), style('text', 9.4, COLOURS.quiet), room), margin, y),
  );
  sheet.as('P', () => {
    sheet.lines(wrapText(kind, style('text', 9.6, COLOURS.quiet), 190), right, flow.y - 5, 'end');
  });
  const under = sheet.as('P', () =>
    sheet.lines(wrapText(number, style('monoStrong', 13), 190), right, flow.y + 9, 'end'),
  );
  flow.y = Math.max(y, under);
}

/** The head of a page after the first, short. */
export function drawShortHead(flow: Flow, worksName: string, number: string): void {
  const quiet = style('text', 9, COLOURS.quiet);
  const { sheet } = flow;
  const right = sheet.width - sheet.margin;
  const top = flow.y - 6;
  sheet.decoration(() => {
    const end = sheet.lines(wrapText(`${number}, continued`, style('mono', 9), 200), right, top, 'end');
    flow.y = Math.max(end, sheet.lines(wrapText(worksName, quiet, 300), sheet.margin, top)) + 10;
  });
}

/** A large title with a line under it. */
export function drawTitle(flow: Flow, title: string, under: string): void {
  const { sheet } = flow;
  flow.y += 14;
  flow.y = sheet.as('H1', () =>
    sheet.lines(wrapText(title, style('heading', 28), sheet.contentWidth), sheet.margin, flow.y),
  );
  flow.y =
    sheet.as('P', () =>
      sheet.lines(wrapText(under, style('text', 11), sheet.contentWidth), sheet.margin, flow.y),
    ) + 12;
}

/** Facts with their names in two columns, filled row by row; a fact without text is left out. */
export function drawFacts(flow: Flow, facts: readonly (readonly [name: string, text: string])[]): void {
  const columnWidth = (flow.sheet.contentWidth - COLUMN_GAP) / 2;
  const { sheet } = flow;
  const said = facts.filter(([, text]) => text !== '');
  const list = sheet.element('L');
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
      const x = sheet.margin + column * (columnWidth + COLUMN_GAP);
      const item = sheet.into(list, () => sheet.element('LI'));
      sheet.into(item, () => {
        sheet.as('Lbl', () => sheet.lines(name, x, flow.y));
        sheet.as('LBody', () => sheet.lines(text, x + indent, flow.y));
      });
    });
    flow.y += height + 2.4;
  }
}

/**
 * A paragraph over the whole width, broken over pages line by line; nothing for an empty one.
 *
 * @param lead stands in front of the text on its first line, as the heading of what follows
 */
export function drawParagraph(flow: Flow, text: Span, gap: number, lead?: Span): void {
  const { sheet } = flow;
  const spans = lead === undefined ? [text] : [lead, text];
  const parts = new Map<Style, Element>();
  if (lead !== undefined) parts.set(lead.style, sheet.element('H2'));
  parts.set(text.style, sheet.element('P'));
  const lines = wrapSpans(spans, sheet.contentWidth);
  for (const line of lines) {
    const height = Math.max(...line.spans.map((span) => lineHeight(span.style)));
    flow.need(height);
    flow.y = sheet.lines([line], sheet.margin, flow.y, 'start', parts);
  }
  if (lines.length > 0) flow.y += gap;
}
