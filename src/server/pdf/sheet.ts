import {
  appendBezierCurve,
  beginMarkedContent,
  beginText,
  closePath,
  concatTransformationMatrix,
  endMarkedContent,
  endText,
  fill,
  fillAndStroke,
  lineTo,
  moveTo,
  PDFOperator,
  PDFOperatorNames,
  setDashPattern,
  setFillingRgbColor,
  setFontAndSize,
  setLineWidth,
  setStrokingRgbColor,
  setTextMatrix,
  showText,
  stroke,
} from 'pdf-lib';
import type { PDFDocument, PDFName, PDFPage } from 'pdf-lib';
import type { Colour } from './colours';
import { FontBook, runWidth, splitRuns } from './fonts';
import type { FontKey } from './fonts';
import { Element, writeStructure } from './structure';
import type { Role } from './structure';
import { lineHeight, textWidth } from './text-layout';
import type { Line, Style } from './text-layout';

/** A4 in points. */
const A4 = { width: 595.28, height: 841.89, margin: 40.5 } as const;

type Point = readonly [x: number, y: number];
type Paint = { fill?: Colour; stroke?: Colour; lineWidth?: number; dash?: readonly [number, number] };
type Drawing =
  | { kind: 'text'; font: FontKey; text: string; x: number; y: number; style: Style }
  | { kind: 'path'; shapes: readonly Shape[]; paint: Paint };
/** `part` is the element of the structure that it belongs to, null for decoration. */
type Operation = Drawing & { part: Element | null };
type Shape = { points: readonly Point[]; closed: boolean } | { centre: Point; radius: number; half: boolean };

/**
 * What will be drawn, page by page. Drawing is put off until all pages are known, so that fonts are embedded only where
 * they are used and a foot can say how many pages there are.
 */
export class Sheet {
  /** Size of the page in the sheet's own units; y runs down from the top edge. */
  readonly width: number;
  readonly height: number;
  readonly margin: number;
  readonly #scale: number;
  readonly #pages: Operation[][] = [[]];
  readonly #root = new Element('Document');
  #current = 0;
  #part: Element = this.#root;
  #isDecoration = false;

  /** @param scale points on paper for a unit of the sheet: under 1, more goes on a page and all of it is smaller */
  constructor(scale: number) {
    this.#scale = scale;
    this.width = A4.width / scale;
    this.height = A4.height / scale;
    this.margin = A4.margin / scale;
  }

  /** Width between the margins. */
  get contentWidth(): number {
    return this.width - 2 * this.margin;
  }

  get pageCount(): number {
    return this.#pages.length;
  }

  newPage(): void {
    this.#pages.push([]);
    this.#current = this.#pages.length - 1;
  }

  /** Goes back to a page, counted from 0, to add to it. */
  turnTo(page: number): void {
    this.#current = page;
  }

  #add(drawing: Drawing): void {
    const part = this.#isDecoration || this.#part.isGroup ? null : this.#part;
    this.#pages[this.#current]?.push({ ...drawing, part });
  }

  /** Begins an element of the structure at the present place of reading, to be drawn {@link into}, perhaps piecemeal. */
  element(role: Role, options: ConstructorParameters<typeof Element>[1] = {}): Element {
    const made = new Element(role, options);
    if (!this.#isDecoration) this.#part.children.push(made);
    return made;
  }

  /** What is drawn meanwhile belongs to an element. */
  into<T>(part: Element, draw: () => T): T {
    const before = this.#part;
    this.#part = part;
    const drawn = draw();
    this.#part = before;
    return drawn;
  }

  /** An element and what is drawn for it, at once. */
  as<T>(role: Role, draw: () => T, options: ConstructorParameters<typeof Element>[1] = {}): T {
    return this.into(this.element(role, options), draw);
  }

  /** What is drawn meanwhile is not read out: the foot of a page, a head that is repeated. */
  decoration(draw: () => void): void {
    const before = this.#isDecoration;
    this.#isDecoration = true;
    draw();
    this.#isDecoration = before;
  }

  /** Text on one line with its baseline at y. `end` puts the end of the text at x. @returns its width */
  text(text: string, x: number, y: number, style: Style, align: 'start' | 'end' = 'start'): number {
    const width = textWidth(text, style);
    let at = align === 'end' ? x - width : x;
    for (const run of splitRuns(text, style.face)) {
      this.#add({ kind: 'text', ...run, x: at, y, style });
      at += runWidth(run, style.size);
    }
    return width;
  }

  /**
   * Lines of a paragraph, the first one's top at y.
   *
   * @param parts the elements that spans of a style belong to, where not to the present one
   * @returns the y under the last line
   */
  lines(
    lines: readonly Line[],
    x: number,
    y: number,
    align: 'start' | 'end' = 'start',
    parts?: ReadonlyMap<Style, Element>,
  ): number {
    let top = y;
    for (const line of lines) {
      const height = Math.max(...line.spans.map((span) => lineHeight(span.style)));
      const size = Math.max(...line.spans.map((span) => span.style.size));
      const baseline = top + (height + size * 0.68) / 2;
      let at = align === 'end' ? x - line.width : x;
      line.spans.forEach((span, index) => {
        // The blank at which a line was broken is drawn too, or its last word would be read as one with the next.
        const words = line.isBroken && index === line.spans.length - 1 ? `${span.text} ` : span.text;
        at += this.into(parts?.get(span.style) ?? this.#part, () =>
          this.text(words, at, baseline, span.style),
        );
      });
      top += height;
    }
    return top;
  }

  rectangle(x: number, y: number, width: number, height: number, colour: Colour): void {
    this.rectangles([{ x, y, width, height }], colour);
  }

  /** Many rectangles of one colour as one path. */
  rectangles(
    boxes: readonly { x: number; y: number; width: number; height: number }[],
    colour: Colour,
  ): void {
    const shapes = boxes.map(({ x, y, width, height }) => ({
      closed: true,
      points: [
        [x, y],
        [x + width, y],
        [x + width, y + height],
        [x, y + height],
      ] as const,
    }));
    this.#add({ kind: 'path', shapes, paint: { fill: colour } });
  }

  line(from: Point, to: Point, colour: Colour, lineWidth: number): void {
    this.#add({
      kind: 'path',
      shapes: [{ points: [from, to], closed: false }],
      paint: { stroke: colour, lineWidth },
    });
  }

  polygon(points: readonly Point[], paint: Paint): void {
    this.#add({ kind: 'path', shapes: [{ points, closed: true }], paint });
  }

  /** A circle, or its left half. */
  circle(centre: Point, radius: number, paint: Paint, half = false): void {
    this.#add({ kind: 'path', shapes: [{ centre, radius, half }], paint });
  }

  /** Draws everything into a document, with its structure. */
  async drawInto(document: PDFDocument): Promise<void> {
    const fonts = new FontBook(document);
    const pages: PDFPage[] = [];
    for (const [number, operations] of this.#pages.entries()) {
      const page = document.addPage([A4.width, A4.height]);
      pages.push(page);
      // The origin moves to the upper left corner, with y running down as everywhere here.
      page.pushOperators(concatTransformationMatrix(this.#scale, 0, 0, -this.#scale, 0, A4.height));
      const names = new Map<FontKey, PDFName>();
      let mcid = 0;
      let open: Element | null | undefined;
      for (const operation of operations) {
        const { part } = operation;
        if (part !== open) {
          if (open !== undefined) page.pushOperators(endMarkedContent());
          open = part;
          if (part === null) page.pushOperators(beginMarkedContent('Artifact'));
          else {
            page.pushOperators(beginPart(part.role, mcid));
            part.pieces.push({ page: number, mcid });
            mcid += 1;
          }
        }
        if (operation.kind === 'path')
          page.pushOperators(...pathOperators(operation.shapes, operation.paint));
        else page.pushOperators(...(await textOperators(operation, page, fonts, names)));
      }
      if (open !== undefined) page.pushOperators(endMarkedContent());
    }
    writeStructure(document, this.#root, pages);
  }
}

function beginPart(role: Role, mcid: number): PDFOperator {
  return PDFOperator.of(PDFOperatorNames.BeginMarkedContentSequence, [`/${role}`, `<</MCID ${mcid}>>`]);
}

async function textOperators(
  { font, text, x, y, style }: Extract<Operation, { kind: 'text' }>,
  page: PDFPage,
  fonts: FontBook,
  names: Map<FontKey, PDFName>,
): Promise<PDFOperator[]> {
  const embedded = await fonts.embed(font);
  let name = names.get(font);
  if (!name) {
    name = page.node.newFontDictionary(font, embedded.ref);
    names.set(font, name);
  }
  return [
    beginText(),
    setFillingRgbColor(...style.colour),
    setFontAndSize(name, style.size),
    setTextMatrix(1, 0, 0, -1, round(x), round(y)),
    showText(embedded.encodeText(text)),
    endText(),
  ];
}

function pathOperators(shapes: readonly Shape[], paint: Paint): PDFOperator[] {
  const operators: PDFOperator[] = [];
  if (paint.fill) operators.push(setFillingRgbColor(...paint.fill));
  if (paint.stroke) operators.push(setStrokingRgbColor(...paint.stroke), setLineWidth(paint.lineWidth ?? 1));
  if (paint.stroke) operators.push(setDashPattern([...(paint.dash ?? [])], 0));
  for (const shape of shapes) operators.push(...('points' in shape ? straight(shape) : curved(shape)));
  operators.push(paint.fill && paint.stroke ? fillAndStroke() : paint.fill ? fill() : stroke());
  return operators;
}

function straight({ points, closed }: { points: readonly Point[]; closed: boolean }): PDFOperator[] {
  const operators = points.map(([x, y], index) =>
    index === 0 ? moveTo(round(x), round(y)) : lineTo(round(x), round(y)),
  );
  return closed ? [...operators, closePath()] : operators;
}

/** Four Bézier curves; 0.5523 is the usual distance of their handles for a circle of radius 1. */
function curved({ centre: [x, y], radius: r, half }: { centre: Point; radius: number; half: boolean }) {
  const h = 0.5523 * r;
  const curve = (...numbers: [number, number, number, number, number, number]) => {
    const [a, b, c, d, e, f] = numbers;
    return appendBezierCurve(round(a), round(b), round(c), round(d), round(e), round(f));
  };
  const left = [
    moveTo(round(x), round(y + r)),
    curve(x - h, y + r, x - r, y + h, x - r, y),
    curve(x - r, y - h, x - h, y - r, x, y - r),
  ];
  const right = [curve(x + h, y - r, x + r, y - h, x + r, y), curve(x + r, y + h, x + h, y + r, x, y + r)];
  return [...left, ...(half ? [] : right), closePath()];
}

/** A thousandth of a point: shorter files, and no digits that depend on the machine. */
function round(value: number): number {
  return Math.round(value * 1000) / 1000;
}
