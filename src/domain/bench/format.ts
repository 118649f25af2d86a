import { quantityOf } from './quantities';
import { wToDbm } from './units';

/** A number with fixed decimals, the typographic minus (U+2212) and no negative zero. */
export function formatNumber(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  if (Number(text) === 0) return text.replace('-', '');
  return text.replace('-', '\u2212');
}

function significant(value: number, figures: number): string {
  if (value === 0 || !Number.isFinite(value)) return formatNumber(value, figures - 1);
  // Rounding may carry into the next decade (9.996 is 10.0), so the exponent is read from the rounded text.
  const exponent = Number(value.toExponential(figures - 1).split('e')[1] ?? '0');
  const decimals = figures - 1 - exponent;
  if (decimals >= 0) return formatNumber(value, decimals);
  return formatNumber(Number(value.toPrecision(figures)), 0);
}

/** A power with three significant figures: W from 10 mW up, then mW and µW. @param powerW W */
export function formatPower(powerW: number): string {
  const size = Math.abs(powerW);
  if (size >= 0.00995 || size === 0) return `${significant(powerW, 3)} W`;
  if (size >= 0.000995) return `${significant(powerW * 1e3, 3)} mW`;
  return `${significant(powerW * 1e6, 3)} µW`;
}

/** A current with three significant figures, in mA under 1 A. @param currentA A */
function formatCurrent(currentA: number): string {
  return Math.abs(currentA) < 0.9995
    ? `${significant(currentA * 1e3, 3)} mA`
    : `${significant(currentA, 3)} A`;
}

/** A frequency in MHz, kHz or Hz with the digits a bench needs. @param freqHz Hz */
export function formatFrequency(freqHz: number): string {
  const trim = (text: string): string => text.replace(/(\.\d*?[1-9])0+$|\.0+$/, '$1');
  if (Math.abs(freqHz) >= 1e6) return `${trim(formatNumber(freqHz / 1e6, 6))} MHz`;
  if (Math.abs(freqHz) >= 1e3) return `${trim(formatNumber(freqHz / 1e3, 3))} kHz`;
  return `${trim(formatNumber(freqHz, 1))} Hz`;
}

/** A level in dBm with two decimals, as a meter shows it. */
export function formatDbm(dbm: number): string {
  return `${formatNumber(dbm, 2)} dBm`;
}

/** A frequency error in whole Hz with its sign. */
function formatFrequencyError(errorHz: number): string {
  const text = formatNumber(errorHz, 0);
  return `${errorHz > 0 && text !== '0' ? '+' : ''}${text} Hz`;
}

/**
 * A value with its unit, in the digits of its quantity. The value is never used to decide once it has been
 * through here. An unknown quantity is shown with three significant figures.
 */
export function formatValue(value: number, quantityKey: string): string {
  const quantity = quantityOf(quantityKey);
  switch (quantity?.format) {
    case 'power':
      return formatPower(value);
    case 'ratio':
      return `${formatNumber(value, 1)} dBc`;
    case 'current':
      return formatCurrent(value);
    case 'frequency_error':
      return formatFrequencyError(value);
    case 'yes_no':
      return value === 1 ? 'yes' : 'no';
    case undefined:
      return significant(value, 3);
  }
}

/** What the instrument showed: dBm for powers, otherwise as {@link formatValue}. */
export function formatAtMeter(value: number, quantityKey: string): string {
  return quantityOf(quantityKey)?.format === 'power'
    ? formatDbm(wToDbm(value))
    : formatValue(value, quantityKey);
}

/** Decimals that leave an uncertainty two significant figures (JCGM 100, 7.2.6). */
function decimalsForU(uncertainty: number): number {
  if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) return 1;
  const exponent = Number(uncertainty.toExponential(1).split('e')[1] ?? '0');
  return Math.min(6, Math.max(0, 1 - exponent));
}

/** Value and expanded uncertainty to the same place: `12.35 ± 0.31`. */
export function formatWithU(value: number, uncertainty: number): string {
  const decimals = decimalsForU(uncertainty);
  return `${formatNumber(value, decimals)} ± ${formatNumber(uncertainty, decimals)}`;
}

/** An expanded uncertainty with its unit: dB with one decimal, the rest with two figures (JCGM 100, 7.2.6). */
export function formatUncertainty(uncertainty: number, unit: 'dB' | 'A' | 'Hz'): string {
  if (unit === 'dB') return `${formatNumber(uncertainty, 1)} dB`;
  const [size, name] = unit === 'A' && uncertainty < 0.9995 ? [uncertainty * 1e3, 'mA'] : [uncertainty, unit];
  return `${formatNumber(size, decimalsForU(size))} ${name}`;
}
