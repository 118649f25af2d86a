import type { ChosenRule } from '~/domain/bench/limit-rules';
import { limitDbc } from '~/domain/bench/limit-rules';
import type { BandKey, TestPoint } from '~/domain/bench/types';
import { wToDbm } from '~/domain/bench/units';
import type { Random } from './random';

/** What is wrong with a unit when it is tested. */
export interface Fault {
  kind: 'fail' | 'too_close';
  quantityKey: string;
  band: BandKey | null;
}

/** What one rig is like, run after run. */
export interface RigTraits {
  powerW: Partial<Record<BandKey, number>>;
  /** Second and third, dBc. */
  harmonics: Partial<Record<BandKey, readonly [number, number]>>;
  efficiency: number;
  restA: number;
  referenceHz: number;
  offsetHz: number;
  firmware: string;
}

interface Design {
  powerW: Partial<Record<BandKey, number>>;
  spreadW: number;
  second: Partial<Record<BandKey, number>>;
  efficiency: number;
  restA: number;
}

const designs: Readonly<Record<string, Design>> = {
  'voe-40': {
    ...{ powerW: { '40m': 2.6 }, spreadW: 0.09, second: { '40m': -55 } },
    ...{ efficiency: 0.385, restA: 0.032 },
  },
  'holm-3': {
    powerW: { '40m': 3.12, '30m': 2.98, '20m': 2.84, '15m': 2.68 },
    spreadW: 0.08,
    second: { '40m': -56, '30m': -53.5, '20m': -52.2, '15m': -54 },
    ...{ efficiency: 0.37, restA: 0.06 },
  },
  'skerry-5': {
    powerW: { '40m': 5.02, '30m': 4.94, '20m': 4.82, '17m': 4.66, '15m': 4.5 },
    spreadW: 0.1,
    second: { '40m': -57, '30m': -55.5, '20m': -54.2, '17m': -55, '15m': -56 },
    ...{ efficiency: 0.42, restA: 0.086 },
  },
};

/** Loss of tap and cable, dB: close enough to what the bench corrects by. */
const tapDb = 40.07;
/** Nothing that is meant to pass comes nearer to −50 dBc, the strictest limit, than this. */
const cleanDbc = -51.6;
const supplyV = 13.8;

/** Draws a rig of a model. `batchShift` is what all of its batch have in common, about −1 to 1. */
export function drawTraits(slug: string, batchShift: number, firmware: string, random: Random): RigTraits {
  const design = designs[slug];
  if (design === undefined) throw new Error(`There is no model ${slug} in the demo.`);
  const own = random.normal();
  const bands = Object.keys(design.powerW) as BandKey[];
  const eachBand = <T>(value: (band: BandKey) => T) =>
    Object.fromEntries(bands.map((band) => [band, value(band)])) as Partial<Record<BandKey, T>>;
  return {
    powerW: eachBand(
      (band) =>
        (design.powerW[band] ?? 0) + design.spreadW * (0.6 * own + 0.5 * random.normal() + 0.8 * batchShift),
    ),
    harmonics: eachBand((band) => {
      const second = (design.second[band] ?? -55) + 0.9 * random.normal() + 0.7 * batchShift;
      return [
        Math.min(cleanDbc, second),
        Math.min(cleanDbc - 2, second - 7.5 + 1.2 * random.normal()),
      ] as const;
    }),
    efficiency: design.efficiency * (1 + 0.015 * random.normal()),
    restA: design.restA * (1 + 0.05 * random.normal()),
    referenceHz: Math.round(12 * random.normal()),
    offsetHz: 700 + Math.round(2 * random.normal()),
    firmware,
  };
}

/** What the tester types at a point. */
export function textOf(
  point: TestPoint,
  traits: RigTraits,
  run: { fault: Fault | null; rule: ChosenRule; time: number },
  random: Random,
): string {
  const powerW = point.band === null ? 0 : (traits.powerW[point.band] ?? 0);
  switch (point.quantity.key) {
    case 'rf_power': {
      const isWeak = run.fault !== null;
      const dbm = wToDbm(isWeak ? (point.lower ?? powerW) * 0.72 : powerW) - tapDb + 0.02 * random.normal();
      return `${dbm.toFixed(2)} dBm`;
    }
    case 'harmonic_2':
    case 'harmonic_3': {
      const order = point.quantity.key === 'harmonic_2' ? 0 : 1;
      const clean = point.band === null ? cleanDbc : (traits.harmonics[point.band]?.[order] ?? cleanDbc);
      const level =
        run.fault === null ? clean + 0.15 * random.normal() : faultyDbc(point, powerW, order + 2, run);
      return Math.abs(level).toFixed(1);
    }
    case 'current_key_down': {
      const amperes = powerW / supplyV / traits.efficiency + 0.002 * random.normal();
      return `${Math.round(1000 * (run.fault === null ? amperes : (point.upper ?? amperes) * 1.09))} mA`;
    }
    case 'current_rest':
      return `${(1000 * traits.restA + 0.2 * random.normal()).toFixed(1)} mA`;
    case 'frequency_error':
      return `${Math.round(traits.referenceHz + (8 * (point.freqHz ?? 0)) / 21e6 + 2 * random.normal())}`;
    default:
      return run.fault === null ? 'yes' : 'no';
  }
}

/** A harmonic well over its limit, or right under it: inside the uncertainty. */
function faultyDbc(
  point: TestPoint,
  powerW: number,
  order: number,
  run: { fault: Fault | null; rule: ChosenRule; time: number },
): number {
  const txFreqHz = point.freqHz ?? 0;
  const limit = limitDbc(run.rule, { powerW, txFreqHz, productFreqHz: order * txFreqHz });
  const at = limit.ok ? limit.limitDbc : -43;
  return run.fault?.kind === 'too_close' ? at - 0.3 + 0.1 * run.time : at + 4.7;
}
