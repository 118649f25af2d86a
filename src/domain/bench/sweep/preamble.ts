import { freqFactor, freqUnitIn, freqUnitOf, levelUnitIn, toDbm } from './level-units';
import type { FreqUnit, LevelUnit } from './types';

/** What the lines before the points say. */
export interface Preamble {
  rbwHz: number | null;
  detector: string | null;
  referenceDbm: number | null;
  startHz: number | null;
  stopHz: number | null;
  bins: number | null;
  /** How many traces are announced. */
  traces: number;
  freqUnit: FreqUnit | null;
  levelUnit: LevelUnit | null;
}

const VALUE = /^([+-]?[\d.,]+(?:e[+-]?\d+)?)\s*[,;\t ]?\s*([a-zµ]*)/i;

function parseNumber(text: string): number | null {
  const value = Number(/^[+-]?\d+,\d+$/.test(text) ? text.replace(',', '.') : text.replace(/[,.]$/, ''));
  return text === '' || !Number.isFinite(value) ? null : value;
}

function frequencyValue(text: string): number | null {
  const match = VALUE.exec(text);
  const value = parseNumber(match?.[1] ?? '');
  if (value === null) return null;
  const unit = freqUnitOf(match?.[2] ?? '');
  return value * (unit === null ? 1 : freqFactor(unit));
}

/** Reads a preamble of any shape: a name, a mark (`:`, `=`, `;`, `,`, tab) and a value on each line. */
export function readPreamble(lines: readonly string[]): Preamble {
  const found: Preamble = {
    rbwHz: null,
    detector: null,
    referenceDbm: null,
    startHz: null,
    stopHz: null,
    bins: null,
    traces: 0,
    freqUnit: null,
    levelUnit: null,
  };
  for (const line of lines) {
    const clean = line
      .replace(/^[\s#!%;"*]+/, '')
      .replace(/"/g, '')
      .slice(0, 500);
    const match = /^([^:=;,\t]+?)\s*(?:\(([^)]*)\)|\[([^\]]*)\])?\s*[:=;,\t]+\s*(.*)$/.exec(clean);
    if (match === null) continue;
    const name = (match[1] ?? '').toLowerCase();
    const unitInName = match[2] ?? match[3] ?? '';
    const rest = match[4] ?? '';
    const withUnit = /[a-z]/i.test(rest) ? rest : `${rest.replace(/[,;\s]+$/, '')} ${unitInName}`;
    if (/^(rbw|res(olution)?\.?\s*(bw|bandwidth))\b/.test(name)) found.rbwHz ??= frequencyValue(withUnit);
    else if (/\bdetector\b|^det$/.test(name)) found.detector ??= rest.replace(/[,;\s]+$/, '') || null;
    else if (/^(ref(erence)?\.?\s*(level|lev|lvl))\b/.test(name)) {
      const value = parseNumber(VALUE.exec(rest)?.[1] ?? '');
      const unit = levelUnitIn(withUnit) ?? 'dBm';
      found.referenceDbm ??= value === null ? null : toDbm(value, unit);
    } else if (/^start\b/.test(name)) found.startHz ??= frequencyValue(withUnit);
    else if (/^stop\b/.test(name)) found.stopHz ??= frequencyValue(withUnit);
    else if (/^bins?$/.test(name)) found.bins ??= frequencyValue(rest);
    else if (/^trace$/.test(name)) found.traces += 1;
    else if (/^(x|freq(uency)?)[\s-]*(axis\s*)?units?$/.test(name)) found.freqUnit ??= freqUnitIn(rest);
    else if (/^(y|level|amplitude|power)[\s-]*(axis\s*)?units?$/.test(name))
      found.levelUnit ??= levelUnitIn(rest);
  }
  return found;
}
