import type { BandKey } from './types';
import { usualSuspects } from './usual-suspects';
import type { Direction } from './usual-suspects';

/** What was seen: a point of a model's test plan that failed, and which way. */
export interface Symptom {
  modelId: number;
  band: BandKey | null;
  quantityKey: string;
  direction: Direction;
}

/** A fault that was found and mended, whose next run showed that the remedy held. */
export interface MendedCase {
  cause: string;
  remedy: string | null;
  minutes: number | null;
  /** Every point that had failed. */
  symptoms: readonly Symptom[];
}

/** How near a mended case is: the same model and band, the same model, or any model. */
export type Nearness = 'band' | 'model' | 'any';

export interface LikelyCause {
  cause: string;
  /** From 0 to 1; over all causes the sum is at most 1, and what it lacks is a cause that nobody has named yet. */
  share: number;
  /** How many of how many mended cases, at the nearest level where there are any; null where there are none. */
  counted: { n: number; of: number; nearness: Nearness } | null;
  /** Whether the trade knows it as common practice. */
  isUsual: boolean;
  /** How one looks for it, by common practice. */
  look: string | null;
  /** What helped, most often first. */
  remedies: string[];
  /** Median of the minutes that mending it took; null where none were written down. */
  minutes: number | null;
}

/**
 * How many cases the level behind weighs as much as: with fewer, it leads; with many more, the nearer level's own
 * counts do.
 */
export const BACK_OFF_CASES = 4;

const mostRemedies = 3;

/**
 * Ranks the causes of a failed run by the works' own history of the same symptoms, smoothed where it is thin.
 *
 * Each level is smoothed by the one behind it (Dirichlet smoothing with a concentration of m = 4 cases, as in
 * D. J. C. MacKay and L. C. Bauman Peto, *A hierarchical Dirichlet language model*, 1995), from any model, to the same
 * model, to the same model and band:
 *
 *     p(cause) = (n(cause) + m · p′(cause)) / (N + m)
 *
 * with n cases of the cause among N of the level, and p′ the level behind; behind the last stand the usual suspects,
 * each with its share of their weights. Where a run failed at several points, a case belongs to a level if one of its
 * symptoms does, and the suspects' shares are averaged over the points.
 *
 * One more case of a cause never lowers its place; shares sum to at most 1.
 */
export function rankCauses(symptoms: readonly Symptom[], cases: readonly MendedCase[]): LikelyCause[] {
  const levels = (['band', 'model', 'any'] as const).map((nearness) => ({
    nearness,
    cases: cases.filter((each) => isNear(each, symptoms, nearness)),
  }));
  const suspects = suspectsOf(symptoms);
  const named = new Map<string, string>();
  for (const { cause } of [...(levels.at(-1)?.cases ?? []), ...suspects.values()]) {
    const key = causeKey(cause);
    if (!named.has(key)) named.set(key, cause);
  }
  const counted = levels.find((level) => level.cases.length > 0);
  return [...named]
    .map(([key, cause]) => {
      const own = (all: readonly MendedCase[]) => all.filter((each) => causeKey(each.cause) === key);
      const share = levels.reduceRight(
        (behind, level) =>
          (own(level.cases).length + BACK_OFF_CASES * behind) / (level.cases.length + BACK_OFF_CASES),
        suspects.get(key)?.share ?? 0,
      );
      const mended = own(levels.at(-1)?.cases ?? []);
      return {
        cause,
        share,
        counted:
          counted === undefined
            ? null
            : { n: own(counted.cases).length, of: counted.cases.length, nearness: counted.nearness },
        isUsual: suspects.has(key),
        look: suspects.get(key)?.look ?? null,
        remedies: byFrequency(mended.flatMap(({ remedy }) => remedy ?? [])).slice(0, mostRemedies),
        minutes: median(mended.flatMap(({ minutes }) => minutes ?? [])),
      };
    })
    .sort((a, b) => b.share - a.share || a.cause.localeCompare(b.cause, 'en'));
}

/** Two people who type the same cause mean the same one, whatever the case and the blanks. */
export function causeKey(cause: string): string {
  return cause.trim().replaceAll(/\s+/gu, ' ').replace(/\.$/u, '').toLowerCase();
}

function isNear(mended: MendedCase, symptoms: readonly Symptom[], nearness: Nearness): boolean {
  return mended.symptoms.some((theirs) =>
    symptoms.some(
      (ours) =>
        ours.quantityKey === theirs.quantityKey &&
        ours.direction === theirs.direction &&
        (nearness === 'any' || ours.modelId === theirs.modelId) &&
        (nearness !== 'band' || ours.band === theirs.band),
    ),
  );
}

/** Suspects of all symptoms by the key of their cause, each with its share of the weights. */
function suspectsOf(symptoms: readonly Symptom[]) {
  const found = new Map<string, { cause: string; look: string; share: number }>();
  for (const { quantityKey, direction } of symptoms) {
    const all = usualSuspects(quantityKey, direction);
    const total = all.reduce((sum, { weight }) => sum + weight, 0);
    for (const { cause, look, weight } of all) {
      const key = causeKey(cause);
      const before = found.get(key);
      const share = (before?.share ?? 0) + weight / total / symptoms.length;
      found.set(key, { cause, look: before?.look ?? look, share });
    }
  }
  return found;
}

function byFrequency(texts: readonly string[]): string[] {
  const counts = new Map<string, number>();
  for (const text of texts) counts.set(text, (counts.get(text) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1]).map(([text]) => text);
}

function median(values: readonly number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)];
  const lower = sorted[Math.floor((sorted.length - 1) / 2)];
  return upper === undefined || lower === undefined ? null : (upper + lower) / 2;
}
