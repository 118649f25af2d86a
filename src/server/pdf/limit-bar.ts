import { marginOf } from '~/domain/bench/decision';
import { limitBar } from '~/domain/bench/limit-bar';
import type { LimitBar } from '~/domain/bench/limit-bar';
import type { StatedPoint } from '~/domain/certificates/statement';
import { COLOURS } from './colours';
import type { Flow } from './flow';
import type { Sheet } from './sheet';
import { lineHeight, style, wrapText } from './text-layout';

type Bar = { band: string; point: StatedPoint; model: LimitBar };

const NAME = style('text', 8.2, COLOURS.quiet);
const FIGURES = style('text', 8.2, COLOURS.quiet);
const NAME_WIDTH = 42;
const FIGURES_WIDTH = 160;
const THICKNESS = 11;
const TINTS = { clear: COLOURS.patinaWash, too_close: COLOURS.lampWash, over: COLOURS.stopWash } as const;

/** Distance to the nearer limit counted in expanded uncertainties, negative outside. */
function nearness(point: StatedPoint): number {
  const margin = marginOf(point.value, point.lower, point.upper) ?? Infinity;
  return margin / (point.uncertainty?.value || 1);
}

/**
 * One bar a band: the guarded reading that lies nearest to its limit. Bands without a guarded limit have no bar.
 */
export function worstBars(points: readonly StatedPoint[]): Bar[] {
  const bars = new Map<string, Bar>();
  for (const point of points) {
    if (point.band === null || point.decision !== 'guarded') continue;
    const { value, lower, upper, uncertainty, unit } = point;
    const model = limitBar(
      {
        value,
        lower,
        upper,
        low: uncertainty?.low ?? null,
        high: uncertainty?.high ?? null,
        guard: uncertainty?.value ?? 0,
        uUnit: uncertainty?.unit === 'dB' ? 'dB' : null,
      },
      unit,
    );
    const before = bars.get(point.band);
    if (model && (!before || nearness(point) < nearness(before.point))) {
      bars.set(point.band, { band: point.band, point, model });
    }
  }
  return [...bars.values()];
}

/** A place on a bar as its distance from the limit that matters, in the unit of the reading. */
function offsetOf({ point, model }: Bar, fraction: number): number {
  const anchor = model.limits.reduce<number | null>(
    (best, { value }) =>
      best === null || Math.abs(value - point.value) < Math.abs(best - point.value) ? value : best,
    null,
  );
  return model.min + fraction * (model.max - model.min) - (anchor ?? 0);
}

/** From the offsets of all bars to places across the page. */
type Scale = { from: number; to: number; x: (offset: number) => number };

/**
 * Draws the bars with their caption, all on one scale with their limits in line, so that bands can be compared. Zones
 * differ in tint and, for black and white, in their edges and the hatching of the forbidden one; the limit is an upright
 * line, the reading a dot with a whisker of its expanded uncertainty.
 */
export function drawLimitBars(flow: Flow, bars: readonly Bar[]): void {
  if (bars.length === 0) return;
  const { sheet } = flow;
  const from = Math.min(...bars.map((bar) => offsetOf(bar, 0)));
  const to = Math.max(...bars.map((bar) => offsetOf(bar, 1)));
  const left = sheet.margin + NAME_WIDTH;
  const width = sheet.contentWidth - NAME_WIDTH - FIGURES_WIDTH - 10;
  const scale = { from, to, x: (offset: number) => left + ((offset - from) / (to - from)) * width };

  for (const bar of bars) {
    const names = wrapText(`${bar.band} `, NAME, NAME_WIDTH - 4);
    const figures = wrapText(figuresOf(bar), FIGURES, FIGURES_WIDTH);
    const namesTall = names.length * lineHeight(NAME);
    const figuresTall = figures.length * lineHeight(FIGURES);
    const height = Math.max(flow.isDense || bars.length > 3 ? 17 : 22, namesTall + 4, figuresTall + 4);
    flow.need(height + 14);
    const middle = flow.y + height / 2;
    const draw = () => {
      sheet.lines(names, sheet.margin, middle - namesTall / 2);
      drawBar(sheet, bar, scale, middle);
      sheet.lines(figures, sheet.margin + sheet.contentWidth, middle - figuresTall / 2, 'end');
    };
    sheet.as('Figure', draw, { alt: spoken(bar) });
    flow.y += height;
  }
  const caption = 'On each band, the reading nearest to its guarded limit, with its uncertainty';
  sheet.as('P', () => sheet.text(caption, left, flow.y + 9, NAME));
  flow.y += 14;
}

function figuresOf({ point }: Bar): string {
  return `${point.label} ${point.text}, ${point.limitText}`;
}

/** What the bar shows, for those who do not see it. */
function spoken(bar: Bar): string {
  const { uncertainty } = bar.point;
  const spread = uncertainty === null ? '' : ` with an uncertainty of ${uncertainty.text}`;
  return `Limit bar, ${bar.band}: ${bar.point.label} ${bar.point.text}${spread}, allowed ${bar.point.limitText}.`;
}

function drawBar(sheet: Sheet, bar: Bar, { from, to, x }: Scale, middle: number): void {
  const { model, point } = bar;
  const top = middle - THICKNESS / 2;
  const bottom = top + THICKNESS;
  const across = (fraction: number) => x(offsetOf(bar, fraction));
  for (const zone of model.zones) {
    const start = zone.from <= 0 ? x(from) : across(zone.from);
    const end = zone.to >= 1 ? x(to) : across(zone.to);
    sheet.rectangle(start, top, end - start, THICKNESS, TINTS[zone.kind]);
    if (zone.kind === 'too_close') {
      for (const edge of [start, end]) sheet.line([edge, top], [edge, bottom], COLOURS.lamp, 0.4);
    }
    if (zone.kind === 'over') {
      for (let at = start + 4; at + 4 < end; at += 6)
        sheet.line([at, bottom], [at + 3, top], COLOURS.stop, 0.35);
    }
  }
  for (const { at } of model.limits) {
    sheet.line([across(at), top - 3.5], [across(at), bottom + 3.5], COLOURS.stop, 1.4);
  }
  if (model.whisker) {
    sheet.line([across(model.whisker.from), middle], [across(model.whisker.to), middle], COLOURS.ink, 1.1);
  }
  const fill = point.verdict === 'pass' ? COLOURS.patina : COLOURS.ink;
  sheet.circle([across(model.dot), middle], 4, { fill });
}
