import { eq } from 'drizzle-orm';
import type { BandKey } from '~/domain/bench/types';
import { models, testPlanRevisions, testPoints } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';

interface Figures {
  bands: readonly BandKey[];
  bandsAreChosen: boolean;
  powerW: readonly [number, number];
  keyDownA: number;
  restA: number;
}

const figures: Readonly<Record<string, Figures>> = {
  'voe-40': { bands: ['40m'], bandsAreChosen: false, powerW: [2, 3.2], keyDownA: 0.6, restA: 0.045 },
  'holm-3': {
    ...{ bands: ['40m', '30m', '20m', '15m'], bandsAreChosen: true },
    ...{ powerW: [2.4, 3.6], keyDownA: 0.7, restA: 0.08 },
  },
  'skerry-5': {
    ...{ bands: ['40m', '30m', '20m', '17m', '15m'], bandsAreChosen: false },
    ...{ powerW: [4, 5.5], keyDownA: 0.95, restA: 0.115 },
  },
};

/** Inside the band in every Region. */
export const testFreqHz: Readonly<Partial<Record<BandKey, number>>> = {
  '40m': 7_030_000,
  '30m': 10_116_000,
  '20m': 14_060_000,
  '17m': 18_086_000,
  '15m': 21_060_000,
};

/** Drafts a model's first test plan: 13.8 V, 50 Ω, each band alone, then what is tested once. */
export async function draftTestPlan(tx: Tx, slug: string, createdAt: Date): Promise<void> {
  const of = figures[slug];
  const [model] = await tx.select({ id: models.id }).from(models).where(eq(models.slug, slug));
  if (model === undefined || of === undefined) throw new Error(`There is no model ${slug}.`);
  const [{ insertId: testPlanRevisionId }] = await tx.insert(testPlanRevisions).values({
    ...{ modelId: model.id, letter: 'A', state: 'draft', note: 'First issue.', supplyV: 13.8, loadOhm: 50 },
    createdAt,
  });
  const fixed = { limitRule: 'fixed', decision: 'simple' } as const;
  const legal = { lowerLimit: null, upperLimit: null, limitRule: 'spurious', decision: 'guarded' } as const;
  const points = [
    ...of.bands.flatMap((band) => {
      const at = {
        band,
        freqHz: testFreqHz[band] ?? null,
        condition: of.bandsAreChosen ? `band.${band}` : null,
      };
      return [
        { ...at, ...fixed, quantityKey: 'rf_power', lowerLimit: of.powerW[0], upperLimit: of.powerW[1] },
        { ...at, ...legal, quantityKey: 'harmonic_2' },
        { ...at, ...legal, quantityKey: 'harmonic_3' },
        { ...at, ...fixed, quantityKey: 'current_key_down', lowerLimit: null, upperLimit: of.keyDownA },
        { ...at, ...fixed, quantityKey: 'frequency_error', lowerLimit: -100, upperLimit: 100 },
      ];
    }),
    { ...fixed, quantityKey: 'current_rest', lowerLimit: null, upperLimit: of.restA },
    { ...fixed, quantityKey: 'check', lowerLimit: 1, upperLimit: null },
  ];
  await tx
    .insert(testPoints)
    .values(points.map((point, index) => ({ ...point, testPlanRevisionId, position: index + 1 })));
}
