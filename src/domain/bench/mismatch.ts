/** Reflections and what they do to a level. Plain transmission-line formulas (VSWR S, reflection ρ). */

/** Magnitude of the reflection coefficient, ρ = (S − 1)/(S + 1). @param vswr 1 or more */
export function reflectionOf(vswr: number): number {
  return (vswr - 1) / (vswr + 1);
}

/** Return loss in dB, −20·lg ρ; Infinity for a perfect match. */
export function returnLossDb(vswr: number): number {
  return -20 * Math.log10(reflectionOf(vswr));
}

/** Part of the power that is reflected, as a loss in dB: −10·lg(1 − ρ²). */
export function mismatchLossDb(vswr: number): number {
  const rho = reflectionOf(vswr);
  return -10 * Math.log10(1 - rho * rho);
}

/**
 * Limits of the level error at a joint whose phases are unknown: 20·lg(1 ± ρ₁ρ₂), dB. The distribution
 * between them is U-shaped.
 */
export function mismatchLimitsDb(vswrA: number, vswrB: number): { plusDb: number; minusDb: number } {
  const product = reflectionOf(vswrA) * reflectionOf(vswrB);
  return { plusDb: 20 * Math.log10(1 + product), minusDb: 20 * Math.log10(1 - product) };
}
