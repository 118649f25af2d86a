import { commonEdges } from './bands';
import type { BandKey, TestPoint } from './types';
import { dbmToW, wToDbm } from './units';

/** What may be measured of a rig beside its power, without a figure of its own: the law's limit, or yes or no. */
export const templateQuantities = ['harmonic_2', 'harmonic_3', 'spurious', 'check'] as const;
export type TemplateQuantity = (typeof templateQuantities)[number];

/** What a rig is meant to do, as far as its first test plan follows from it. */
export interface RigFigures {
  bands: readonly BandKey[];
  /** Not every rig has every band: a point of a band is for the rigs that have it. */
  bandsVary: boolean;
  ratedPowerW: number;
  measure: readonly TemplateQuantity[];
  /** Largest supply current with the key down, A; null where it is not measured. */
  keyDownA: number | null;
  /** Largest supply current at rest, A; null where it is not measured. */
  restA: number | null;
  /** Largest frequency error to either side, Hz; null where it is not measured. */
  frequencyErrorHz: number | null;
}

export type TemplatePoint = Pick<
  TestPoint,
  'band' | 'freqHz' | 'lower' | 'upper' | 'limitRule' | 'decision' | 'required' | 'condition'
> & { quantityKey: string };

/** How far the power of a rig may lie from what it is rated for, dB: common practice, and only where a plan begins. */
export const ratedPowerToleranceDb = 1;

/** Key of the option that is a band. */
export function bandOption(band: BandKey): string {
  return `band.${band}`;
}

/**
 * A test frequency inside the band in every Region, in whole kHz: 60 kHz up where the band is wider than 100 kHz,
 * its middle otherwise. Hz.
 */
export function testFreqHz(band: BandKey): number {
  const { lowHz, highHz } = commonEdges(band);
  const wide = highHz - lowHz > 100e3;
  return Math.floor((wide ? lowHz + 60e3 : (lowHz + highHz) / 2) / 1e3) * 1e3;
}

/**
 * The points of a first test plan: each band with its power, the chosen products by the rule of the destination, and
 * the works' own limits as they were given; then what is tested once.
 */
export function templatePoints(rig: RigFigures): TemplatePoint[] {
  const own = { limitRule: 'fixed', decision: 'simple', required: true } as const;
  const legal = { limitRule: 'spurious', decision: 'guarded', required: true } as const;
  const products = rig.measure.filter((key) => key !== 'check');
  const perBand = rig.bands.flatMap((band): TemplatePoint[] => {
    const at = { band, freqHz: testFreqHz(band), condition: rig.bandsVary ? bandOption(band) : null };
    return [
      {
        ...at,
        ...own,
        quantityKey: 'rf_power',
        lower: shifted(rig.ratedPowerW, -ratedPowerToleranceDb),
        upper: shifted(rig.ratedPowerW, ratedPowerToleranceDb),
      },
      ...products.map((quantityKey) => ({ ...at, ...legal, quantityKey, lower: null, upper: null })),
      ...(rig.keyDownA === null
        ? []
        : [{ ...at, ...own, quantityKey: 'current_key_down', lower: null, upper: rig.keyDownA }]),
      ...(rig.frequencyErrorHz === null
        ? []
        : [
            {
              ...at,
              ...own,
              quantityKey: 'frequency_error',
              lower: -rig.frequencyErrorHz,
              upper: rig.frequencyErrorHz,
            },
          ]),
    ];
  });
  const once = { band: null, freqHz: null, condition: null } as const;
  return [
    ...perBand,
    ...(rig.restA === null
      ? []
      : [{ ...once, ...own, quantityKey: 'current_rest', lower: null, upper: rig.restA }]),
    ...(rig.measure.includes('check')
      ? [{ ...once, ...own, quantityKey: 'check', lower: 1, upper: null }]
      : []),
  ];
}

/** A power that many dB away, in three figures as a plan is written. */
function shifted(powerW: number, byDb: number): number {
  return Number(dbmToW(wToDbm(powerW) + byDb).toPrecision(3));
}
