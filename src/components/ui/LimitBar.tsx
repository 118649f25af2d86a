import { formatValue } from '~/domain/bench/format';
import type { BarZone, LimitBar as Bar } from '~/domain/bench/limit-bar';
import type { Quantity } from '~/domain/bench/quantities';
import type { Verdict } from '~/domain/bench/types';

interface Props {
  bar: Bar;
  verdict: Verdict;
  /** Whose digits and unit the limits are lettered in. */
  quantity: Pick<Quantity, 'format' | 'unit'>;
  /** The same in words, for who does not see it: "−51.1 dBc, ±0.9 dB, limit −47.2 dBc: pass". */
  label: string;
  /** Without its lettering: a row among others. */
  compact?: boolean | undefined;
}

const FILLS = { clear: 'fill-patina-wash', too_close: 'fill-lamp-wash', over: 'fill-stop-wash' } as const;
const WORDS = { clear: 'clear', too_close: 'too close to call', over: 'over' } as const;
/** Width of each word as a part of the narrowest bar it is lettered on (some 300 px). */
const WORD_WIDTHS = { clear: 0.12, too_close: 0.36, over: 0.11 } as const;
const DOTS = {
  pass: 'fill-patina',
  too_close: 'fill-lamp',
  fail: 'fill-stop',
  not_run: 'fill-ink-2',
} as const;

/** A verdict as a picture: zones, limits, the reading and the whisker of its expanded uncertainty. */
export function LimitBar({ bar, verdict, quantity, label, compact = false }: Props) {
  const top = compact ? 5 : 24;
  const height = compact ? 16 : 22;
  const middle = top + height / 2;
  return (
    <svg
      width="100%"
      height={compact ? 26 : 70}
      role="img"
      aria-label={label}
      className="block overflow-visible"
    >
      {bar.zones.map((zone) => (
        <rect
          key={`${zone.kind} ${zone.from}`}
          x={percent(zone.from)}
          y={top}
          width={percent(zone.to - zone.from)}
          height={height}
          className={FILLS[zone.kind]}
        />
      ))}
      {letterLimits(bar, quantity).map((limit) => (
        <g key={limit.at}>
          <line
            x1={percent(limit.at)}
            x2={percent(limit.at)}
            y1={top - 5}
            y2={top + height + 5}
            className="stroke-stop"
            strokeWidth="2.5"
          />
          {!compact && (
            <text
              x={percent(limit.at)}
              y="13"
              textAnchor={limit.anchor}
              className="fill-stop text-[0.8125rem]"
            >
              {limit.text}
            </text>
          )}
        </g>
      ))}
      {bar.whisker !== null && <Whisker from={bar.whisker.from} to={bar.whisker.to} middle={middle} />}
      <circle cx={percent(bar.dot)} cy={middle} r={compact ? 5.5 : 7} className={DOTS[verdict]} />
      {!compact &&
        placeWords(bar.zones).map((word) => (
          <text
            key={`${word.text} ${word.at}`}
            x={percent(word.at)}
            y={top + height + 20}
            textAnchor={word.anchor}
            className="fill-ink-2 text-[0.8125rem]"
          >
            {word.text}
          </text>
        ))}
    </svg>
  );
}

function Whisker({ from, to, middle }: { from: number; to: number; middle: number }) {
  return (
    <g className="stroke-ink" strokeWidth="2">
      <line x1={percent(from)} x2={percent(to)} y1={middle} y2={middle} />
      <line x1={percent(from)} x2={percent(from)} y1={middle - 6} y2={middle + 6} />
      <line x1={percent(to)} x2={percent(to)} y1={middle - 6} y2={middle + 6} />
    </g>
  );
}

function percent(fraction: number): string {
  return `${Math.round(fraction * 10_000) / 100}%`;
}

type Anchor = 'start' | 'middle' | 'end';

/** Each limit with its words; two that stand close have theirs on their outer sides. */
function letterLimits(bar: Bar, quantity: Props['quantity']): { at: number; text: string; anchor: Anchor }[] {
  const [first, second] = bar.limits;
  const crowded = first !== undefined && second !== undefined && Math.abs(second.at - first.at) < 0.4;
  return bar.limits.map(({ at, value, side }) => {
    const word = bar.limits.length === 1 ? 'limit' : side === 'lower' ? 'least' : 'most';
    const text = `${word} ${formatValue(value, quantity)}`;
    if (crowded) return { at, text, anchor: side === 'lower' ? 'end' : 'start' };
    return { at, text, anchor: at < 0.2 ? 'start' : at > 0.8 ? 'end' : 'middle' };
  });
}

interface Word {
  text: string;
  at: number;
  anchor: Anchor;
}

/** Words under the zones; one that would run into another is left out, "too close to call" last of all. */
function placeWords(zones: readonly BarZone[]): Word[] {
  const placed: (Word & { left: number; right: number })[] = [];
  for (const kind of ['too_close', 'clear', 'over'] as const) {
    for (const zone of zones.filter((candidate) => candidate.kind === kind)) {
      const width = WORD_WIDTHS[kind];
      const centre = (zone.from + zone.to) / 2;
      const atStart = zone.from <= 0 || centre - width / 2 < 0;
      const atEnd = !atStart && (zone.to >= 1 || centre + width / 2 > 1);
      const left = atStart ? Math.max(zone.from, 0) : atEnd ? 1 - width : centre - width / 2;
      const right = left + width;
      if (right > 1 || placed.some((other) => left < other.right && right > other.left)) continue;
      const anchor = atStart ? 'start' : atEnd ? 'end' : 'middle';
      const under = kind === 'over' && zones.indexOf(zone) === 0 && zones.length > 1;
      const text = under ? 'under' : WORDS[kind];
      placed.push({ text, at: atStart ? left : atEnd ? right : centre, anchor, left, right });
    }
  }
  return placed;
}
