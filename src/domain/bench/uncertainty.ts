import tQuantile from '@stdlib/stats-base-dists-t-quantile';
import type { Distribution, UncertaintyComponent } from './types';

/** Coverage probability of every expanded uncertainty here. */
const COVERAGE = 0.9545;

/** From here on the t distribution is taken as normal, k = 2. */
const NU_LARGE = 100;

/** Divisor of a half-width (JCGM 100:2008, 4.3); a normal one is divided by the k it was expanded with. */
export function divisorOf(distribution: Distribution, k = 2): number {
  switch (distribution) {
    case 'normal':
      return k;
    case 'rectangular':
      return Math.sqrt(3);
    case 'triangular':
      return Math.sqrt(6);
    case 'u-shaped':
      return Math.sqrt(2);
  }
}

/**
 * A line of a budget.
 * @param value half-width or expanded uncertainty, in the unit of the budget; its sign does not matter
 * @param options `k` for a normal one (default 2), `nu` degrees of freedom (default: infinitely many)
 */
export function component(
  name: string,
  value: number,
  distribution: Distribution,
  options: { k?: number; nu?: number } = {},
): UncertaintyComponent {
  const divisor = divisorOf(distribution, options.k);
  const size = Math.abs(value);
  return { name, value: size, distribution, divisor, u: size / divisor, nu: options.nu ?? null };
}

/** Root of the sum of squares of the standard uncertainties (JCGM 100, 5.1.2, uncorrelated inputs). */
export function combinedU(components: readonly UncertaintyComponent[]): number {
  return Math.hypot(...components.map((line) => line.u));
}

/**
 * Effective degrees of freedom by Welch–Satterthwaite (JCGM 100, G.4.1); null is infinitely many.
 */
export function effectiveNu(components: readonly UncertaintyComponent[]): number | null {
  const uc = combinedU(components);
  let sum = 0;
  for (const line of components) if (line.nu !== null && uc > 0) sum += (line.u / uc) ** 4 / line.nu;
  return sum === 0 ? null : 1 / sum;
}

/**
 * Coverage factor: 2 where ν_eff is 100 or more at the usual coverage, otherwise Student's t two-sided, with
 * ν_eff cut to the next lower whole number (JCGM 100, G.4.2).
 * @param coverage two-sided probability, default 0.9545
 */
export function coverageFactor(nuEff: number | null, coverage = COVERAGE): number {
  if ((nuEff === null || nuEff >= NU_LARGE) && coverage === COVERAGE) return 2;
  const nu = nuEff === null ? 1e9 : Math.max(1, Math.floor(nuEff + 1e-9));
  return tQuantile((1 + coverage) / 2, nu);
}

/** A budget summed up: combined and expanded uncertainty with its k, in the unit of its components. */
export interface Combined {
  uc: number;
  nuEff: number | null;
  k: number;
  U: number;
}

/** Combines a budget and expands it at 95.45 %. */
export function combine(components: readonly UncertaintyComponent[]): Combined {
  const uc = combinedU(components);
  const nuEff = effectiveNu(components);
  const k = coverageFactor(nuEff);
  return { uc, nuEff, k, U: k * uc };
}

/** The W interval of a power known within ±U dB: given as it is, not made symmetric. */
export function dbIntervalToW(powerW: number, uDb: number): { lowW: number; highW: number } {
  return { lowW: powerW * 10 ** (-uDb / 10), highW: powerW * 10 ** (uDb / 10) };
}

/**
 * Type A evaluation of repeated readings (JCGM 100, 4.2): standard uncertainty of their mean with n − 1
 * degrees of freedom; null for fewer than two.
 */
export function repeatability(values: readonly number[]): UncertaintyComponent | null {
  const n = values.length;
  if (n < 2) return null;
  const mean = values.reduce((sum, value) => sum + value, 0) / n;
  const variance = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (n - 1);
  return component('Repeatability', Math.sqrt(variance / n), 'normal', { k: 1, nu: n - 1 });
}
