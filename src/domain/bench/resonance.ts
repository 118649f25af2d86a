/**
 * Frequency at which an inductance and a capacitance resonate, Hz: f = 1/(2π√(LC)) (Thomson).
 * @param inductanceH above 0, H
 * @param capacitanceF above 0, F
 */
export function resonanceHz(inductanceH: number, capacitanceF: number): number {
  return 1 / (2 * Math.PI * Math.sqrt(inductanceH * capacitanceF));
}

/** Capacitance that resonates with an inductance (H) at a frequency (Hz), F. */
export function resonatingCapacitanceF(inductanceH: number, freqHz: number): number {
  return 1 / ((2 * Math.PI * freqHz) ** 2 * inductanceH);
}
