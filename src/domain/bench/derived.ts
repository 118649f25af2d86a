/** Quantities that follow from readings; each with its formula. */

/** Efficiency as a fraction: P / (V·I). @param powerW RF output, W */
export function efficiency(powerW: number, supplyV: number, currentA: number): number {
  return powerW / (supplyV * currentA);
}

/** Power turned into heat, W: V·I − P. */
export function dissipationW(powerW: number, supplyV: number, currentA: number): number {
  return supplyV * currentA - powerW;
}

/**
 * Junction temperature in °C: ambient plus dissipation times the sum of the thermal resistances (K/W) from
 * junction to ambient, times the duty (1 for key-down).
 */
export function junctionTemperatureC(
  ambientC: number,
  powerW: number,
  thermalResistancesKPerW: readonly number[],
  duty = 1,
): number {
  return ambientC + duty * powerW * thermalResistancesKPerW.reduce((sum, each) => sum + each, 0);
}

/** Output at which a small plastic power transistor should have a sink, W each (common practice, no source). */
const SMALL_TRANSISTOR_W = 2;

/**
 * Caution for a small plastic power transistor without a heat sink (common practice: about 1.5 W of output
 * at CW duty); null where there is none to give.
 */
export function smallTransistorCaution(input: {
  outputWPerDevice: number;
  keyDownMode: boolean;
  hasSink: boolean;
}): string | null {
  if (input.hasSink) return null;
  if (input.outputWPerDevice >= SMALL_TRANSISTOR_W) {
    return 'Each output transistor would carry 2 W or more without a heat sink: fit one. Parts get hot.';
  }
  if (input.keyDownMode) {
    return 'Key-down modes heat an output transistor without a heat sink past its rating: fit one. Parts get hot.';
  }
  return null;
}
