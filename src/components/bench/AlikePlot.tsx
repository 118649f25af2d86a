import { useQuery } from '@tanstack/react-query';
import { z } from 'zod';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { alikePlot, FEWEST_ALIKE, median, placeAmong } from '~/domain/bench/alike-plot';
import { formatValue } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { paths } from '~/lib/paths';
import { alikePoint } from '~/schemas/bench-alike';
import type { AlikePoint } from '~/schemas/bench-alike';
import type { Point } from './run-sheet';

interface Props {
  runId: number;
  point: Point;
  judgement: PointJudgement;
}

const [width, height] = [320, 112];
const frame = { left: 8, right: width - 8, top: 26, bottom: 66 };
/** Where the reading in hand stands, under the dots. */
const handY = 80;

/** The last values like the reading in hand, as dots over the axis of its limits. */
export function AlikePlot({ runId, point, judgement }: Props) {
  const { data, isError } = useQuery({
    queryKey: ['alike', runId],
    queryFn: () => readAlike(runId),
    staleTime: Infinity,
  });
  const { quantity } = point;
  if (quantity.format === 'yes_no') return null;
  const values = data?.find(({ testPointId }) => testPointId === point.id)?.values ?? [];
  const runs = values.filter(({ isHistory }) => !isHistory);
  const counted = runs.map(({ value }) => value);
  const old = values.length - runs.length;
  const middle = median(counted);
  const title = (
    <h2 id="alike-title" className="mb-1">
      {data === undefined ? 'Like it' : `${runs.length} like it`}
    </h2>
  );
  if (data === undefined || middle === null || runs.length < FEWEST_ALIKE) {
    return (
      <section className="sheet" aria-labelledby="alike-title">
        {title}
        <p className="quiet">{fewText(isError, data === undefined, runs.length, old)}</p>
      </section>
    );
  }
  const { value: reading, lower, upper } = judgement;
  const limits = { lower: lower ?? point.lower, upper: upper ?? point.upper };
  const plot = alikePlot({ values, reading, ...limits }, frame);
  const place = reading === null ? null : placeAmong(reading, counted);
  const oldText = old === 0 ? '' : ` Hollow: ${old} from old sheets, not counted.`;
  const words = `Median ${formatValue(middle, quantity)}.${place === null ? '' : ` This one is ${place}.`}`;
  return (
    <section className="sheet" aria-labelledby="alike-title">
      {title}
      <p className="quiet">
        {words}
        {oldText}
      </p>
      {plot !== null && (
        <svg
          viewBox={`0 0 ${width} ${height}`}
          role="img"
          aria-label={`The last ${runs.length} like it, values rising to the right. ${words}${oldText}`}
          className="mt-2 block w-full max-w-lg"
          fontSize="12"
        >
          <line
            x1={frame.left}
            x2={frame.right}
            y1={frame.bottom + 6}
            y2={frame.bottom + 6}
            className="stroke-rule"
          />
          <line
            x1={plot.median}
            x2={plot.median}
            y1={frame.top - 4}
            y2={frame.bottom + 6}
            className="stroke-ink-2"
            strokeDasharray="3 3"
          />
          {plot.limits.map(({ x, value, side }) => (
            <g key={side}>
              <line x1={x} x2={x} y1="16" y2={handY + 8} className="stroke-stop" strokeWidth="2.5" />
              <text
                x={x}
                y="11"
                textAnchor={x < width * 0.3 ? 'start' : x > width * 0.7 ? 'end' : 'middle'}
                className="fill-stop"
              >
                {side === 'lower' ? 'least' : 'most'} {formatValue(value, quantity)}
              </text>
            </g>
          ))}
          {plot.dots.map(({ x, y, isHistory }, index) => (
            <circle
              key={index}
              cx={x}
              cy={y}
              r={isHistory ? 3.25 : 4}
              className={isHistory ? 'fill-sheet stroke-slate' : 'fill-slate'}
              strokeWidth={isHistory ? 1.5 : 0}
            />
          ))}
          {plot.reading !== null && (
            <g>
              <line
                x1={plot.reading}
                x2={plot.reading}
                y1={frame.top - 4}
                y2={handY}
                className="stroke-copper"
                strokeWidth="1.5"
              />
              <circle cx={plot.reading} cy={handY} r="6" className="fill-copper" />
            </g>
          )}
          <text x={frame.left} y={height - 4} className="fill-ink-2">
            {formatValue(plot.ends.min, quantity)}
          </text>
          <text x={frame.right} y={height - 4} textAnchor="end" className="fill-ink-2">
            {formatValue(plot.ends.max, quantity)}
          </text>
        </svg>
      )}
      <details className="mt-1">
        <summary className="font-semibold">As a table</summary>
        <AlikeTable {...{ values, point }} />
      </details>
    </section>
  );
}

function AlikeTable({ values, point }: { values: AlikePoint['values']; point: Point }) {
  return (
    <div
      className="table-frame mt-2 max-h-72 overflow-y-auto"
      role="region"
      aria-label="Values like it"
      tabIndex={0}
    >
      <table className="table text-[0.9375rem]">
        <caption className="sr-only">Values like it, the newest first</caption>
        <thead>
          <tr>
            <th scope="col">Unit</th>
            <th scope="col" className="num">
              Value
            </th>
            <th scope="col">Verdict</th>
          </tr>
        </thead>
        <tbody>
          {values.map(({ serial, runNo, value, verdict }, index) => (
            <tr key={index}>
              <th scope="row" className="font-mono font-normal">
                {serial}
                <span className="quiet block">{runNo === null ? 'old sheet' : `run ${runNo}`}</span>
              </th>
              <td className="num">{formatValue(value, point.quantity)}</td>
              <td>
                {verdict === null ? (
                  <span className="quiet">not judged</span>
                ) : (
                  <VerdictMark verdict={verdict} />
                )}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function fewText(isError: boolean, isReading: boolean, runs: number, old: number): string {
  if (isError) return 'What earlier runs found could not be read. The reading counts all the same.';
  if (isReading) return 'Being read.';
  const begin =
    runs === 0
      ? 'No closed run has a value like it yet'
      : `Only ${runs} closed ${runs === 1 ? 'run has a value' : 'runs have values'} like it`;
  return `${begin}: too few to compare with.${old === 0 ? '' : ` Old sheets have ${old}.`}`;
}

async function readAlike(runId: number): Promise<AlikePoint[]> {
  const response = await fetch(paths.api.runAlike(runId), { headers: { accept: 'application/json' } });
  if (!response.ok) throw new Error('What earlier runs found could not be read.');
  return z.object({ points: z.array(alikePoint) }).parse(await response.json()).points;
}
