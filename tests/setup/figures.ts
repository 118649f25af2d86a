import type { Application } from '../../src/server/run/application';

/** What a figure may ask of the command that runs it. */
export interface BenchTools {
  /** A running application with the demo works, the same one for all figures; it ends with the command. */
  demo: () => Promise<Application>;
  /** Takes what has to be undone at the end, last first. */
  onStop: (task: () => Promise<void>) => void;
}

/** What was measured, in milliseconds: at least five of each, taken in one run. */
export interface Samples {
  values: number[];
  /** Of the least that the same could take; null where there is no such thing. */
  floors: number[] | null;
}

/** A figure that is measured: how fast something is, beside the least that it could take. */
export interface Figure {
  name: string;
  /** At most so many times its floor; of a figure without a floor, at most so many milliseconds. */
  goal: number;
  run: (tools: BenchTools) => Promise<Samples>;
}

/** A figure as it came out, and as it is written to `.bench/latest.json`: medians in milliseconds. */
export interface Outcome {
  name: string;
  value: number;
  floor: number | null;
  ratio: number | null;
  goal: number;
  met: boolean;
}

const registered: Figure[] = [];
const leastSamples = 5;

/** Adds a figure; called once at the top of each file of `tests/bench/`. */
export function figure(added: Figure): void {
  if (registered.some(({ name }) => name === added.name)) throw new Error(`Two figures are “${added.name}”.`);
  registered.push(added);
}

/** The figures of the files that were loaded. */
export function figures(): readonly Figure[] {
  return registered;
}

async function timed(work: () => unknown): Promise<number> {
  const start = performance.now();
  await work();
  return performance.now() - start;
}

/**
 * Times a piece of work and its floor by turns, so that both meet the same machine; a few first turns, in which
 * code is still being compiled, do not count.
 */
export async function byTurns(
  value: () => unknown,
  floor: () => unknown,
  { times = 15, warmUp = 5 }: { times?: number; warmUp?: number } = {},
): Promise<Samples> {
  const values: number[] = [];
  const floors: number[] = [];
  for (let turn = 0; turn < warmUp + times; turn += 1) {
    const floorMs = await timed(floor);
    const valueMs = await timed(value);
    if (turn < warmUp) continue;
    floors.push(floorMs);
    values.push(valueMs);
  }
  return { values, floors };
}

/** The middle of some numbers, of an even count the mean of the two in the middle. */
export function median(numbers: readonly number[]): number {
  const sorted = [...numbers].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)] ?? NaN;
  const lower = sorted[Math.ceil(sorted.length / 2) - 1] ?? NaN;
  return (lower + upper) / 2;
}

/** What a figure came to. @throws where there are too few samples for a median to mean something */
export function judgeFigure({ name, goal }: Figure, { values, floors }: Samples): Outcome {
  for (const samples of [values, floors ?? values]) {
    if (samples.length < leastSamples || samples.some((each) => !(Number.isFinite(each) && each >= 0))) {
      throw new Error(`“${name}” has ${samples.length} samples; ${leastSamples} usable ones are needed.`);
    }
  }
  const value = median(values);
  const floor = floors === null ? null : median(floors);
  const ratio = floor === null ? null : value / floor;
  return { name, value, floor, ratio, goal, met: (ratio ?? value) <= goal };
}

/** The outcomes as one table. */
export function tableOf(outcomes: readonly Outcome[]): string {
  const rows = outcomes.map(({ name, value, floor, ratio, goal, met }) => [
    name,
    `${value.toFixed(1)} ms`,
    floor === null ? '' : `${floor.toFixed(1)} ms`,
    ratio === null ? '' : `${ratio.toFixed(2)} ×`,
    ratio === null ? `≤ ${goal} ms` : `≤ ${goal} ×`,
    met ? 'yes' : 'NO',
  ]);
  const head = ['figure', 'value', 'floor', 'ratio', 'goal', 'met'];
  const widths = head.map((title, column) =>
    Math.max(...[head, ...rows].map((row) => (row[column] ?? title).length)),
  );
  return [head, ...rows]
    .map((row) =>
      row
        .map((cell, column) => {
          const width = widths[column] ?? 0;
          return column === 0 ? cell.padEnd(width) : cell.padStart(width);
        })
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}
