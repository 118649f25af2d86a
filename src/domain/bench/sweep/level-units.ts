import { dbUvToDbm, vRmsToW, wToDbm } from '~/domain/bench/units';
import type { FreqUnit, LevelUnit } from './types';

/** Load across which voltage levels of analysers stand, Ω. */
export const ANALYSER_OHM = 50;

const LEVEL_SPELLINGS: Record<string, LevelUnit> = {
  dbm: 'dBm',
  dbuv: 'dBµV',
  dbµv: 'dBµV',
  dbμv: 'dBµV',
  dbmv: 'dBmV',
  dbv: 'dBV',
  w: 'W',
  mw: 'mW',
  v: 'V',
  vrms: 'V',
  db: 'dB',
};

const FREQ_SPELLINGS: Record<string, FreqUnit> = { hz: 'Hz', khz: 'kHz', mhz: 'MHz', ghz: 'GHz' };

const FREQ_FACTOR: Record<FreqUnit, number> = { Hz: 1, kHz: 1e3, MHz: 1e6, GHz: 1e9 };

const SI_PREFIXES: Record<string, number> = {
  f: 1e-15,
  p: 1e-12,
  n: 1e-9,
  u: 1e-6,
  µ: 1e-6,
  μ: 1e-6,
  m: 1e-3,
  '': 1,
  k: 1e3,
};

/** Hz in one of the unit. */
export function freqFactor(unit: FreqUnit): number {
  return FREQ_FACTOR[unit];
}

/** Frequency unit by its spelling, in any case; null where it is none. */
export function freqUnitOf(text: string): FreqUnit | null {
  return FREQ_SPELLINGS[text.trim().toLowerCase()] ?? null;
}

/** Level unit by its spelling, in any case; null where it is none. */
export function levelUnitOf(text: string): LevelUnit | null {
  return LEVEL_SPELLINGS[text.trim().toLowerCase()] ?? null;
}

/** A power or a voltage with an SI prefix, as it is glued to numbers that range over decades; null where it is none. */
export function prefixedUnitOf(text: string): { unit: 'W' | 'V'; factor: number } | null {
  const match = /^([fpnuµμmk]?)(w|v|vrms)$/i.exec(text.trim());
  const factor = SI_PREFIXES[match?.[1] ?? '?'];
  if (match === null || factor === undefined) return null;
  return { unit: (match[2] ?? '').toLowerCase() === 'w' ? 'W' : 'V', factor };
}

/** Words of a heading or preamble line, to look for units in; `dB(µV)` is one word. */
function wordsOf(text: string): string[] {
  const joined = text.replace(/\bdB\s*\(\s*(m|[uµμm]?V)\s*\)/gi, 'dB$1');
  return joined.split(/[^\p{L}µ]+/u).filter((word) => word !== '');
}

/** First frequency unit named in a text. */
export function freqUnitIn(text: string): FreqUnit | null {
  for (const word of wordsOf(text)) {
    const unit = freqUnitOf(word);
    if (unit !== null) return unit;
  }
  return null;
}

/** First level unit named in a text; single letters count only in brackets or after an underscore. */
export function levelUnitIn(text: string): LevelUnit | null {
  for (const word of wordsOf(text)) {
    const unit = word.length > 1 ? levelUnitOf(word) : null;
    if (unit !== null) return unit;
  }
  const single = /[([_/]\s*(m?[wv])\s*[)\]]?$/i.exec(text.trim());
  return single === null ? null : levelUnitOf(single[1] ?? '');
}

/** Level in dBm; null where the unit is a ratio or the level has no logarithm (0 W). */
export function toDbm(level: number, unit: LevelUnit): number | null {
  switch (unit) {
    case 'dBm':
      return level;
    case 'dBµV':
      return dbUvToDbm(level, ANALYSER_OHM);
    case 'dBmV':
      return dbUvToDbm(level + 60, ANALYSER_OHM);
    case 'dBV':
      return dbUvToDbm(level + 120, ANALYSER_OHM);
    case 'W':
      return level > 0 ? wToDbm(level) : null;
    case 'mW':
      return level > 0 ? wToDbm(level / 1e3) : null;
    case 'V':
      return level > 0 ? wToDbm(vRmsToW(level, ANALYSER_OHM)) : null;
    case 'dB':
      return null;
  }
}
