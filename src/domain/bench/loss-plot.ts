import { formatFrequency, formatNumber } from './format';
import type { PathPart } from './types';

/** A loss against log frequency, in the coordinates of a drawing. */
export interface LossPlot {
  points: { x: number; y: number }[];
  /** Upright lines at round frequencies. */
  freqTicks: { x: number; label: string }[];
  lossTicks: { y: number; label: string }[];
}

export interface PlotFrame {
  left: number;
  right: number;
  top: number;
  bottom: number;
}

const STEPS = [0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100];
const WANTED_LOSS_TICKS = 4;

/** Lays a part's table out in a frame; null where one row leaves nothing to draw. */
export function lossPlot(part: Pick<PathPart, 'loss'>, frame: PlotFrame): LossPlot | null {
  const first = part.loss[0];
  const last = part.loss.at(-1);
  if (first === undefined || last === undefined || part.loss.length < 2) return null;
  const losses = part.loss.map(([, lossDb]) => lossDb);
  const [least, most] = [Math.min(...losses), Math.max(...losses)];
  const step = STEPS.find((each) => (most - least) / each <= WANTED_LOSS_TICKS) ?? 100;
  const low = Math.floor(least / step) * step;
  const high = Math.max(Math.ceil(most / step) * step, low + step);
  const [fromLog, toLog] = [Math.log10(first[0]), Math.log10(last[0])];
  const x = (freqHz: number) =>
    frame.left + ((Math.log10(freqHz) - fromLog) / (toLog - fromLog)) * (frame.right - frame.left);
  // A greater loss stands higher, as its number is greater.
  const y = (lossDb: number) => frame.bottom - ((lossDb - low) / (high - low)) * (frame.bottom - frame.top);
  const decimals = step < 0.1 ? 2 : step < 1 ? 1 : 0;
  return {
    points: part.loss.map(([freqHz, lossDb]) => ({ x: x(freqHz), y: y(lossDb) })),
    freqTicks: roundFrequencies(first[0], last[0]).map((freqHz) => ({
      x: x(freqHz),
      label: formatFrequency(freqHz),
    })),
    lossTicks: Array.from({ length: Math.round((high - low) / step) + 1 }, (_, index) => {
      const lossDb = low + index * step;
      return { y: y(lossDb), label: formatNumber(lossDb, decimals) };
    }),
  };
}

const MOST_FREQ_TICKS = 6;

/** Decades, or 1, 2, 5 of them where there are few. */
function roundFrequencies(fromHz: number, toHz: number): number[] {
  const within = (sizes: readonly number[]): number[] => {
    const found: number[] = [];
    for (let decade = Math.floor(Math.log10(fromHz)); decade <= Math.ceil(Math.log10(toHz)); decade += 1) {
      found.push(...sizes.map((size) => size * 10 ** decade));
    }
    return found.filter((freqHz) => freqHz >= fromHz * 0.9999 && freqHz <= toHz * 1.0001);
  };
  return [[1, 2, 5], [1, 3], [1]].map(within).find(({ length }) => length <= MOST_FREQ_TICKS) ?? within([1]);
}

const SHOWN_ROWS = 60;

/** The rows to show as a table: all, or of many every so-manieth with the last. */
export function shownRows({ loss }: Pick<PathPart, 'loss'>): [number, number][] {
  const every = Math.ceil(loss.length / SHOWN_ROWS);
  return loss.filter((_, index) => index % every === 0 || index === loss.length - 1);
}
