import type { Verdict } from '~/domain/bench/types';
import { COLOURS } from './colours';
import type { Colour } from './colours';
import type { Sheet } from './sheet';
import { style } from './text-layout';

/** A verdict as it is printed; a reading let go by the owner is none of the computed ones. */
export type PrintedVerdict = Verdict | 'concession';

const WORDS: Record<PrintedVerdict, string> = {
  pass: 'Pass',
  concession: 'Concession',
  too_close: 'Too close',
  fail: 'Fail',
  not_run: 'No limit',
};

const INKS: Record<PrintedVerdict, Colour> = {
  pass: COLOURS.patina,
  concession: COLOURS.lamp,
  too_close: COLOURS.lamp,
  fail: COLOURS.stop,
  not_run: COLOURS.quiet,
};

export function verdictWord(verdict: PrintedVerdict): string {
  return WORDS[verdict];
}

/** Points from the left edge of the mark to its word. */
export const MARK_ADVANCE = 15;
const RADIUS = 4.6;

/**
 * The mark and its word, the word's baseline at y. The shape alone tells the verdict in black and white: a filled disc,
 * a half-filled ring, a cross, an empty ring; a concession is a ring with a dot.
 */
export function drawVerdict(sheet: Sheet, verdict: PrintedVerdict, x: number, y: number, size: number): void {
  const ink = INKS[verdict];
  const centre = [x + RADIUS + 0.6, y - size * 0.34] as const;
  const [cx, cy] = centre;
  if (verdict === 'pass') {
    sheet.circle(centre, RADIUS, { fill: ink });
  } else if (verdict === 'fail') {
    const arm = RADIUS * 0.8;
    sheet.line([cx - arm, cy - arm], [cx + arm, cy + arm], ink, 2.2);
    sheet.line([cx - arm, cy + arm], [cx + arm, cy - arm], ink, 2.2);
  } else {
    sheet.circle(centre, RADIUS - 0.5, { stroke: ink, lineWidth: 1.1 });
    if (verdict === 'too_close') sheet.circle(centre, RADIUS - 0.5, { fill: ink }, true);
    if (verdict === 'concession') sheet.circle(centre, RADIUS * 0.42, { fill: ink });
  }
  sheet.text(WORDS[verdict], x + MARK_ADVANCE, y, style('strong', size, ink));
}
