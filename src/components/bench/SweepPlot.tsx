import { formatDbm, formatFrequency, formatNumber } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { limitDbc } from '~/domain/bench/limit-rules';
import { quantityOf } from '~/domain/bench/quantities';
import type { Station, StationSweep } from '~/schemas/bench-station';
import { asBandLabel } from './run-sheet';

interface Props {
  sweep: StationSweep;
  station: Station;
  judgements: ReadonlyMap<number, PointJudgement>;
}

const width = 720;
const height = 250;
const left = 62;
const right = 8;
const top = 14;
const bottom = 26;

/** A sweep as a picture, with its harmonics and its limit, and as a table. */
export function SweepPlot({ sweep, station, judgements }: Props) {
  const { understood, analysis, trace, band } = sweep;
  const [lowHz, highHz] = understood.spanHz;
  const floor = Math.min(-80, ...trace.map(([, dbc]) => dbc));
  const lowest = Math.floor(floor / 20) * 20;
  const x = (freqHz: number) => left + ((freqHz - lowHz) / (highHz - lowHz)) * (width - left - right);
  const y = (dbc: number) => top + (Math.min(0, Math.max(lowest, dbc)) / lowest) * (height - top - bottom);
  const levels = Array.from({ length: Math.round(-lowest / 20) + 1 }, (_, index) => -20 * index);
  const limits = limitLine(sweep, station, judgements);
  // Lettered between the carrier and its second harmonic, where nothing else stands.
  const lettered = limits[Math.floor(limits.length / 4)];
  const drawn = analysis.harmonics.filter(({ order, freqHz }) => order <= 5 && freqHz <= highHz);
  const title = `Sweep, ${asBandLabel(band)}`;
  return (
    <figure>
      <figcaption className="mb-2 flex flex-wrap items-baseline justify-between gap-x-4">
        <span className="font-head text-[1.1875rem] font-bold">{title}</span>
        <span className="quiet">
          {[
            sweep.fileName,
            understood.rbwHz === null ? 'RBW not known' : `RBW ${formatFrequency(understood.rbwHz)}`,
            `${understood.points.toLocaleString('en')} points`,
          ].join(' · ')}
        </span>
      </figcaption>
      <svg
        viewBox={`0 0 ${width} ${height}`}
        width="100%"
        role="img"
        aria-label={`${title}: the table below says the same`}
        className="sweep-plot block"
      >
        {levels.map((dbc) => (
          <g key={dbc}>
            <line
              x1={left}
              x2={width - right}
              y1={y(dbc)}
              y2={y(dbc)}
              className="stroke-rule"
              strokeWidth="1"
            />
            {dbc % 40 === 0 && (
              <text x={left - 8} y={y(dbc) + 4} textAnchor="end" className="fill-ink-2">
                {dbc === 0 ? '0 dBc' : formatNumber(dbc, 0)}
              </text>
            )}
          </g>
        ))}
        {ticks(lowHz, highHz).map((freqHz) => (
          <text key={freqHz} x={x(freqHz)} y={height - 6} textAnchor="middle" className="fill-ink-2">
            {formatNumber(freqHz / 1e6, 0)}
          </text>
        ))}
        <text x={width - right} y={height - 6} textAnchor="end" className="fill-ink-2">
          MHz
        </text>
        <polyline
          points={trace.map(([freqHz, dbc]) => `${round(x(freqHz))},${round(y(dbc))}`).join(' ')}
          fill="none"
          className="stroke-ink"
          strokeWidth="1.5"
        />
        {lettered !== undefined && (
          <>
            <polyline
              points={limits.map(([freqHz, dbc]) => `${round(x(freqHz))},${round(y(dbc))}`).join(' ')}
              fill="none"
              className="stroke-stop"
              strokeWidth="2"
              strokeDasharray="7 5"
            />
            <text x={x(lettered[0]) + 4} y={y(lettered[1]) - 8} textAnchor="middle" className="fill-stop">
              limit {formatNumber(lettered[1], 1)}
            </text>
          </>
        )}
        {drawn.map(({ order, freqHz, meterDbc, unitDbc, atMost }) => (
          <text
            key={order}
            x={x(freqHz) + 5}
            y={Math.max(top + 10, y(meterDbc) - (x(freqHz) > width - 110 ? 21 : 5))}
            textAnchor={x(freqHz) > width - 110 ? 'end' : 'start'}
            paintOrder="stroke"
            strokeWidth="4"
            className="fill-patina stroke-sheet font-semibold"
          >
            {nameOf(order)} {atMost ? '≤ ' : ''}
            {formatNumber(unitDbc, 1)}
          </text>
        ))}
      </svg>
      <details className="mt-2">
        <summary className="font-semibold">The sweep as a table</summary>
        <Products sweep={sweep} limits={limits} />
      </details>
      {sweep.notes.map((note) => (
        <p key={note} className="quiet">
          {note}
        </p>
      ))}
    </figure>
  );
}

function Products({ sweep, limits }: { sweep: StationSweep; limits: [number, number][] }) {
  const { fundamental, harmonics, others, notCovered, noiseFloorDbm } = sweep.analysis;
  const rows = [
    ...harmonics.map((each) => ({ ...each, name: `${nameOf(each.order)} harmonic` })),
    ...others.map((each) => ({ ...each, atMost: false, name: 'other' })),
  ];
  return (
    <div className="table-frame mt-2" role="region" aria-label="Products of the sweep" tabIndex={0}>
      <table className="table">
        <caption className="sr-only">Products of the sweep</caption>
        <thead>
          <tr>
            <th scope="col">Product</th>
            <th scope="col" className="num">
              Frequency
            </th>
            <th scope="col" className="num">
              At the meter
            </th>
            <th scope="col" className="num">
              At the unit
            </th>
            <th scope="col" className="num">
              Limit
            </th>
          </tr>
        </thead>
        <tbody>
          <tr>
            <th scope="row">carrier</th>
            <td className="num">{formatFrequency(fundamental.freqHz)}</td>
            <td className="num">{formatDbm(fundamental.levelDbm)}</td>
            <td className="num">{formatDbm(fundamental.unitDbm)}</td>
            <td className="num" />
          </tr>
          {rows.map(({ name, freqHz, meterDbc, unitDbc, atMost }) => (
            <tr key={`${name} ${freqHz}`}>
              <th scope="row">{name}</th>
              <td className="num">{formatFrequency(freqHz)}</td>
              <td className="num">
                {atMost ? '≤ ' : ''}
                {formatNumber(meterDbc, 1)} dBc
              </td>
              <td className="num">
                {atMost ? '≤ ' : ''}
                {formatNumber(unitDbc, 1)} dBc
              </td>
              <td className="num">{limitAt(limits, freqHz)}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="quiet">
        Noise floor {formatDbm(noiseFloorDbm)} at the meter.
        {notCovered.length > 0 && ` Not covered: ${notCovered.map(({ order }) => nameOf(order)).join(', ')}.`}
      </p>
    </div>
  );
}

/** The limit over the span, by the power measured on this band; empty while that is not known. */
function limitLine(
  { band, understood }: StationSweep,
  { sheet }: Station,
  judgements: ReadonlyMap<number, PointJudgement>,
): [number, number][] {
  const power = sheet.points.find((point) => point.band === band && point.quantityKey === 'rf_power');
  const powerW = power === undefined ? null : (judgements.get(power.id)?.value ?? null);
  const txFreqHz = power?.freqHz ?? null;
  if (powerW === null || txFreqHz === null) return [];
  const [lowHz, highHz] = understood.spanHz;
  const steps = 120;
  return Array.from({ length: steps + 1 }, (_, index) => lowHz + ((highHz - lowHz) * index) / steps).flatMap(
    (productFreqHz): [number, number][] => {
      const limit = limitDbc(sheet.ruleKey, { powerW, txFreqHz, productFreqHz });
      return limit.ok ? [[productFreqHz, limit.limitDbc]] : [];
    },
  );
}

function limitAt(limits: [number, number][], freqHz: number): string {
  const found = limits.find(([at]) => at >= freqHz);
  return found === undefined ? '' : `${formatNumber(found[1], 1)} dBc`;
}

function nameOf(order: number): string {
  return quantityOf(`harmonic_${order}`)?.label.split(' ')[0] ?? `${order}th`;
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
