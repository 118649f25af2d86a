import type { Quantity } from './quantities';
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

/** A voltage with four significant figures, in mV under 1 V. */
function formatVoltage(volts: number): string {
  return Math.abs(volts) < 0.99995 ? `${significant(volts * 1e3, 4)} mV` : `${significant(volts, 4)} V`;
}

/** A time with three significant figures in s, ms or µs. */
function formatTime(seconds: number): string {
  const size = Math.abs(seconds);
  if (size >= 0.9995) return `${significant(seconds, 3)} s`;
  return size >= 0.9995e-3 ? `${significant(seconds * 1e3, 3)} ms` : `${significant(seconds * 1e6, 3)} µs`;
}

const ZERO_CELSIUS_K = 273.15;

/** A frequency error in whole Hz with its sign. */
function formatFrequencyError(errorHz: number): string {
  const text = formatNumber(errorHz, 0);
  return `${errorHz > 0 && text !== '0' ? '+' : ''}${text} Hz`;
}

/**
 * A value with its unit, in the digits of its quantity. The value is never used to decide once it has been
 * through here.
 * @param value in the unit of the quantity inside
 */
export function formatValue(value: number, { format, unit }: Pick<Quantity, 'format' | 'unit'>): string {
  switch (format) {
    case 'power':
      return formatPower(value);
    case 'ratio':
    case 'level':
      return `${formatNumber(value, 1)} ${unit}`;
    case 'current':
      return formatCurrent(value);
    case 'voltage':
      return formatVoltage(value);
    case 'frequency':
      return formatFrequency(value);
    case 'frequency_error':
      return formatFrequencyError(value);
    case 'time':
      return formatTime(value);
    case 'temperature':
      return `${formatNumber(value - ZERO_CELSIUS_K, 1)} °C`;
    case 'percent':
      return `${formatNumber(value * 100, 1)} %`;
    case 'yes_no':
      return value === 1 ? 'yes' : 'no';
    case 'number':
      return significant(value, 3);
  }
}

/** What the instrument showed: dBm for powers, otherwise as {@link formatValue}. */
export function formatAtMeter(value: number, quantity: Pick<Quantity, 'format' | 'unit'>): string {
  return quantity.format === 'power' && value > 0 ? formatDbm(wToDbm(value)) : formatValue(value, quantity);
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

/** Unit in which the uncertainty of a quantity is stated: levels and powers in dB, the rest in their own. */
export type UncertaintyUnit = 'dB' | 'W' | 'A' | 'V' | 'Hz' | 's' | 'K' | '1';

/** How large it has to be to be written in the unit itself, and what is written below. */
const SMALL: Partial<Record<UncertaintyUnit, readonly [factor: number, name: string]>> = {
  W: [1e3, 'mW'],
  A: [1e3, 'mA'],
  V: [1e3, 'mV'],
  s: [1e3, 'ms'],
};

/** An expanded uncertainty with its unit: dB with one decimal, the rest with two figures (JCGM 100, 7.2.6). */
export function formatUncertainty(
  uncertainty: number,
  unit: UncertaintyUnit,
  format: Quantity['format'],
): string {
  if (unit === 'dB') return `${formatNumber(uncertainty, 1)} dB`;
  if (unit === '1') {
    const size = format === 'percent' ? uncertainty * 100 : uncertainty;
    return `${formatNumber(size, decimalsForU(size))}${format === 'percent' ? ' %' : ''}`;
  }
  const [factor, name] = SMALL[unit] ?? [1, unit];
  if (uncertainty >= 0.9995 || factor === 1)
    return `${formatNumber(uncertainty, decimalsForU(uncertainty))} ${unit}`;
  const size = uncertainty * factor;
  return `${formatNumber(size, decimalsForU(size))} ${name}`;
}
