import { COLOURS } from './colours';
import { lineHeight, shrinkToFit, style, wrapText } from './text-layout';
import type { Sheet } from './sheet';

type TagModel = { serial: string; about: string; right: { text: string; quiet: boolean }[] };

const CUT = 18;
const PAD = 14;

/**
 * The manila tag of a unit: cut corners on the left, a copper eyelet, the serial number large. It grows downwards
 * with its texts.
 *
 * @returns its height and a function that draws it
 */
export function layOutTag(
  model: TagModel,
  x: number,
  width: number,
): { height: number; draw: (sheet: Sheet, y: number) => void } {
  const textX = x + 41;
  const rightWidth = model.right.length > 0 ? width * 0.36 : 0;
  const leftWidth = width - 41 - PAD - rightWidth - (rightWidth > 0 ? 10 : 0);
  const serial = wrapText(
    model.serial,
    shrinkToFit(model.serial, style('monoStrong', 20), leftWidth, 9),
    leftWidth,
  );
  const about = wrapText(model.about, style('text', 10), leftWidth);
  const paragraphs = model.right.map(({ text, quiet }) =>
    wrapText(text, style('text', quiet ? 9 : 10, quiet ? COLOURS.quiet : COLOURS.ink), rightWidth),
  );
  const right = paragraphs.flat();
  const tall = (lines: typeof right) =>
    lines.reduce((sum, line) => sum + Math.max(...line.spans.map((span) => lineHeight(span.style))), 0);
  const height = Math.max(tall(serial) + tall(about), tall(right), 40) + 17;

  return {
    height,
    draw(sheet, y) {
      const cut = Math.min(CUT, height / 3);
      sheet.polygon(
        [
          [x + cut, y],
          [x + width, y],
          [x + width, y + height],
          [x + cut, y + height],
          [x, y + height - cut],
          [x, y + cut],
        ],
        { fill: COLOURS.manila, stroke: COLOURS.manilaEdge, lineWidth: 0.6 },
      );
      sheet.circle([x + 24, y + height / 2], 9, {
        fill: COLOURS.white,
        stroke: COLOURS.copper,
        lineWidth: 2.6,
      });
      const top = y + (height - tall(serial) - tall(about)) / 2;
      const under = sheet.as('H2', () => sheet.lines(serial, textX, top));
      sheet.as('P', () => sheet.lines(about, textX, under));
      let rightTop = y + (height - tall(right)) / 2;
      for (const lines of paragraphs) {
        rightTop = sheet.as('P', () => sheet.lines(lines, x + width - PAD, rightTop, 'end'));
      }
    },
  };
}
