import { formatFrequency, formatNumber } from '~/domain/bench/format';
import { ordinal } from '~/domain/bench/plan-products';
import type { DrawnSweep } from '~/schemas/bench-sweeps';
import { placeLabels } from './sweep-labels';
import type { PlotLabel } from './sweep-labels';
import type { LimitAt } from './sweep-limits';

interface Props {
  title: string;
  /** What is known of the sweep, beside its title. */
  facts: string;
  sweep: Pick<DrawnSweep, 'understood' | 'trace'> & { analysis: DrawnSweep['analysis'] | null };
  limitAt: LimitAt;
}

const width = 720;
const height = 270;
const left = 62;
const right = 8;
const top = 14;
const bottom = 26;
/** Names that are lettered; all stand in the table. */
const letteredOrders = 5;
const letteredProducts = 6;
const longestName = 24;

const fills = {
  patina: 'fill-patina',
  copper: 'fill-copper',
  stop: 'fill-stop',
  slate: 'fill-slate',
} as const;

/** A sweep as a picture: trace, harmonics, named products, limit and noise floor. */
export function SweepPlot({ title, facts, sweep, limitAt }: Props) {
  const { understood, analysis, trace } = sweep;
  const [lowHz, highHz] = understood.spanHz;
  const lowest = Math.floor(Math.min(-80, ...trace.map(([, db]) => db)) / 20) * 20;
  const x = (freqHz: number) => left + ((freqHz - lowHz) / (highHz - lowHz)) * (width - left - right);
  const y = (db: number) => top + (Math.min(0, Math.max(lowest, db)) / lowest) * (height - top - bottom);
  const levels = Array.from({ length: Math.round(-lowest / 20) + 1 }, (_, index) => -20 * index);
  const limits = analysis === null ? [] : limitLine(lowHz, highHz, limitAt);
  // Lettered between the carrier and its second harmonic, where nothing else stands.
  const lettered = limits[Math.floor(limits.length / 4)];
  const floorDb = analysis === null ? null : analysis.noiseFloorDbm - analysis.fundamental.levelDbm;
  const at = (freqHz: number, db: number) => ({ x: x(freqHz), y: y(db) });
  const lines: PlotLabel[] = [];
  if (lettered !== undefined) {
    const text = `limit ${formatNumber(lettered[1], 1)}`;
    lines.push({ ...at(...lettered), key: 'limit', text, tone: 'stop', isMarked: false });
  }
  if (floorDb !== null) {
    const text = `floor ${formatNumber(floorDb, 1)}`;
    lines.push({ ...at(highHz, floorDb - 12), key: 'floor', text, tone: 'slate', isMarked: false });
  }
  const placed = placeLabels([...lines, ...labelsOf(analysis, at, highHz)], {
    left,
    right: width - right,
    top: top - 8,
    bottom: height - bottom,
  });
  return (
    <figure>
      <figcaption className="mb-2 flex flex-wrap items-baseline justify-between gap-x-4">
        <span className="font-head text-[1.1875rem] font-bold">{title}</span>
        <span className="quiet">{facts}</span>
      </figcaption>
      <svg
        viewBox={`0 0 ${width} ${height}`}
        width="100%"
        role="img"
        aria-label={`${title}: the table below says the same`}
        className="sweep-plot block"
      >
        {levels.map((db) => (
          <g key={db}>
            <line
              x1={left}
              x2={width - right}
              y1={y(db)}
              y2={y(db)}
              className="stroke-rule"
              strokeWidth="1"
            />
            {db % 40 === 0 && (
              <text x={left - 8} y={y(db) + 4} textAnchor="end" className="fill-ink-2">
                {db === 0 ? (analysis === null ? '0 dB' : '0 dBc') : formatNumber(db, 0)}
              </text>
            )}
          </g>
        ))}
        {ticks(lowHz, highHz).map((freqHz) => (
          <text key={freqHz} x={x(freqHz)} y={height - 6} textAnchor="middle" className="fill-ink-2">
            {formatNumber(freqHz / 1e6, highHz - lowHz < 5e6 ? 2 : 0)}
          </text>
        ))}
        <text x={width - right} y={height - 6} textAnchor="end" className="fill-ink-2">
          MHz
        </text>
        {floorDb !== null && (
          <line
            x1={left}
            x2={width - right}
            y1={y(floorDb)}
            y2={y(floorDb)}
            className="stroke-slate"
            strokeWidth="1.5"
            strokeDasharray="2 4"
          />
        )}
        <polyline points={pathOf(trace, x, y)} fill="none" className="stroke-ink" strokeWidth="1.5" />
        {limits.length > 0 && (
          <polyline
            points={pathOf(limits, x, y)}
            fill="none"
            className="stroke-stop"
            strokeWidth="2"
            strokeDasharray="7 5"
          />
        )}
        {placed.map((label) => (
          <g key={label.key}>
            {label.isMarked && <circle cx={label.x} cy={label.y} r="3.5" className={fills[label.tone]} />}
            <text
              x={label.left}
              y={label.top}
              paintOrder="stroke"
              strokeWidth="4"
              className={`${fills[label.tone]} stroke-sheet ${label.isMarked ? 'font-semibold' : ''}`}
            >
              {label.text}
            </text>
          </g>
        ))}
      </svg>
    </figure>
  );
}

function labelsOf(
  analysis: DrawnSweep['analysis'] | null,
  at: (freqHz: number, db: number) => { x: number; y: number },
  highHz: number,
): PlotLabel[] {
  if (analysis === null) return [];
  const harmonics = analysis.harmonics
    .filter(({ order, freqHz }) => order <= letteredOrders && freqHz <= highHz)
    .map(({ order, freqHz, meterDbc, unitDbc, atMost }) => ({
      ...at(freqHz, meterDbc),
      key: `harmonic ${order}`,
      text: `${ordinal(order)} ${atMost ? '≤ ' : ''}${formatNumber(unitDbc, 1)}`,
      ...{ tone: 'patina' as const, isMarked: true },
    }));
  const others = analysis.others.slice(0, letteredProducts).map(({ name, kind, freqHz, meterDbc }) => ({
    ...at(freqHz, meterDbc),
    key: `other ${freqHz}`,
    text: kind === 'unexplained' ? `${formatFrequency(freqHz)}?` : shorten(name),
    ...{ tone: 'copper' as const, isMarked: true },
  }));
  return [...harmonics, ...others];
}

function shorten(name: string): string {
  return name.length <= longestName ? name : `${name.slice(0, longestName - 1)}…`;
}

function pathOf(
  points: readonly (readonly [number, number])[],
  x: (freqHz: number) => number,
  y: (db: number) => number,
): string {
  return points.map(([freqHz, db]) => `${round(x(freqHz))},${round(y(db))}`).join(' ');
}

/** The limit over the span; empty where the rule says none. */
function limitLine(lowHz: number, highHz: number, limitAt: LimitAt): [number, number][] {
  const steps = 120;
  return Array.from({ length: steps + 1 }, (_, index) => lowHz + ((highHz - lowHz) * index) / steps).flatMap(
    (freqHz): [number, number][] => {
      const limit = limitAt(freqHz);
      return limit === null ? [] : [[freqHz, limit]];
    },
  );
}

/** Some five round frequencies of a span. */
function ticks(lowHz: number, highHz: number): number[] {
  const wanted = (highHz - lowHz) / 6;
  const decade = 10 ** Math.floor(Math.log10(wanted));
  const step = [1, 2, 5, 10].map((each) => each * decade).find((each) => each >= wanted) ?? wanted;
  const first = Math.ceil(lowHz / step) * step;
  const count = Math.max(0, Math.floor((highHz - first) / step));
  return Array.from({ length: count + 1 }, (_, index) => first + index * step).filter(
    (freqHz) => freqHz < highHz - 0.06 * (highHz - lowHz),
  );
}

function round(value: number): number {
  return Math.round(value * 10) / 10;
}
