/**
 * Conversions between the ways in which RF power is stated. Definitions: dBm is 10·lg(P / 1 mW); a sine of
 * peak V in a load R carries V²/(2R).
 */

/** Power in dBm. @param powerW W, above 0 (0 gives −Infinity). */
export function wToDbm(powerW: number): number {
  return 10 * Math.log10(powerW / 1e-3);
}

/** Power in W from dBm. */
export function dbmToW(dbm: number): number {
  return 1e-3 * 10 ** (dbm / 10);
}

/** Power in W of a sine with this RMS voltage (V) in the load (Ω). */
export function vRmsToW(vRms: number, loadOhm: number): number {
  return (vRms * vRms) / loadOhm;
}

/** Power in W of a sine with this peak voltage (V) in the load (Ω). */
export function vPkToW(vPk: number, loadOhm: number): number {
  return (vPk * vPk) / (2 * loadOhm);
}

/** Power in W of a sine with this peak-to-peak voltage (V) in the load (Ω). */
export function vPpToW(vPp: number, loadOhm: number): number {
  return (vPp * vPp) / (8 * loadOhm);
}

/** RMS voltage (V) of a sine of this power (W) in the load (Ω). */
export function wToVRms(powerW: number, loadOhm: number): number {
  return Math.sqrt(powerW * loadOhm);
}

/** Peak voltage (V) of a sine of this power (W) in the load (Ω). */
export function wToVPk(powerW: number, loadOhm: number): number {
  return Math.sqrt(2 * powerW * loadOhm);
}

/** Peak-to-peak voltage (V) of a sine of this power (W) in the load (Ω). */
export function wToVPp(powerW: number, loadOhm: number): number {
  return 2 * wToVPk(powerW, loadOhm);
}

/** Level in dBm of a voltage level in dBµV across the load (Ω); 0 dBm is 106.990 dBµV in 50 Ω. */
export function dbUvToDbm(dbUv: number, loadOhm: number): number {
  return wToDbm(vRmsToW(1e-6 * 10 ** (dbUv / 20), loadOhm));
}

/** Level in dBµV across the load (Ω) of a power level in dBm. */
export function dbmToDbUv(dbm: number, loadOhm: number): number {
  return 20 * Math.log10(wToVRms(dbmToW(dbm), loadOhm) / 1e-6);
}

/**
 * Power in W from a diode peak detector: P = (ratio·(V + drop))² / (2R).
 * @param detectorV DC voltage shown, V
 * @param dropV forward drop of the diode at that current, V
 * @param tapRatio line voltage over voltage at the tap: 1 across the load, 2 at half the load
 */
export function diodeToW(detectorV: number, dropV: number, tapRatio: number, loadOhm: number): number {
  return vPkToW(tapRatio * (detectorV + dropV), loadOhm);
}
