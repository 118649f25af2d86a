import { parseDecimal } from './decimal';
import { parseEntry } from './entry';
import { formatPower } from './format';
import type { RunReading } from './judge-run';
import { pathLoss } from './paths';
import type { PathSpec, PeakDetector, TestPoint } from './types';
import { wToDbm } from './units';

/** A reading with the revisions it was read with. */
export interface EquippedReading extends RunReading {
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
}

/** What a person typed into a cell of a run, and what it was read with. */
export interface CellEntry {
  text: string;
  columnUnit?: string | undefined;
  confirmed?: boolean | undefined;
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
  path: PathSpec | null;
  /** Of the chosen instrument, where it is a diode detector. */
  detector: PeakDetector | null;
}

/** What a run says about entries besides its readings. */
export interface CellFacts {
  readings: readonly EquippedReading[];
  /** Rated power of the model, W. */
  ratedPowerW: number;
  /** Load of the test plan, Ω. */
  loadOhm: number;
}

export type CellResult =
  | {
      ok: true;
      /** At the meter, in the unit of the quantity. */
      value: number;
      enteredUnit: string;
      /** Of the test, or of the product where the point is about any product. */
      freqHz: number | null;
    }
  | { ok: false; reason: string; ask: boolean };

const WELL_OVER = 10;

function refuse(reason: string, ask = false): { ok: false; reason: string; ask: boolean } {
  return { ok: false, reason, ask };
}

/** Splits `62 @ 8.93 MHz`: a product that is no harmonic is named by its frequency. */
function splitProduct(
  text: string,
): { ok: true; text: string; freqHz: number } | { ok: false; reason: string } {
  const hint = 'Say where the product stands too, as 62 @ 8.93 MHz.';
  const [, level = '', freq = '', unit = 'MHz'] =
    /^(.*?)\s*(?:@|\bat\b)\s*([\d.,]+)\s*(Hz|kHz|MHz)?\s*$/iu.exec(text) ?? [];
  if (level === '') return { ok: false, reason: hint };
  const number = parseDecimal(freq);
  if (!number.ok) return number;
  const factor = { hz: 1, khz: 1e3, mhz: 1e6 }[unit.toLowerCase()] ?? 1e6;
  return number.value > 0
    ? { ok: true, text: level, freqHz: number.value * factor }
    : { ok: false, reason: hint };
}

/**
 * Level of the band's carrier at the meter, dBm; undefined where its power was not read with the same
 * instrument and path, because then the two levels are not of one scale.
 */
function carrierDbm(point: TestPoint, entry: CellEntry, readings: readonly EquippedReading[]) {
  const same = readings.filter(
    (reading) =>
      reading.quantityKey === 'rf_power' &&
      reading.band === point.band &&
      !reading.voided &&
      reading.instrumentRevisionId === entry.instrumentRevisionId &&
      reading.pathRevisionId === entry.pathRevisionId,
  );
  if (same.length === 0) return undefined;
  return wToDbm(same.reduce((sum, { value }) => sum + value, 0) / same.length);
}

/** Asks about a power at the unit that is far over what the model is rated for. */
function powerQuestion(
  valueW: number,
  point: TestPoint,
  entry: CellEntry,
  ratedPowerW: number,
): string | null {
  const loss = point.freqHz === null ? null : pathLoss(entry.path, point.freqHz);
  const atUnitW = valueW * 10 ** ((loss?.ok === true ? loss.lossDb : 0) / 10);
  if (atUnitW <= WELL_OVER * ratedPowerW) return null;
  const [found, rated] = [formatPower(atUnitW), formatPower(ratedPowerW)];
  return `That is ${found} at the unit, far above the ${rated} of this rig. Is it meant?`;
}

/**
 * Reads what was typed into a cell of a run, the same way in the browser and on the server. `ask` marks what is
 * taken once the person confirms it.
 */
export function readCell(point: TestPoint, entry: CellEntry, facts: CellFacts): CellResult {
  const product = point.quantity.key === 'spurious' ? splitProduct(entry.text) : null;
  if (product?.ok === false) return refuse(product.reason);
  const refPowerDbm = carrierDbm(point, entry, facts.readings);
  const text = product?.text ?? entry.text;
  const parsed = parseEntry(text, point.quantity, {
    columnUnit: entry.columnUnit,
    refPowerDbm,
    loadOhm: facts.loadOhm,
    detector: entry.detector ?? undefined,
    confirmed: entry.confirmed,
  });
  if (!parsed.ok) return parsed;
  if (point.quantity.key === 'rf_power' && entry.confirmed !== true) {
    const question = powerQuestion(parsed.value, point, entry, facts.ratedPowerW);
    if (question !== null) return refuse(question, true);
  }
  const { value, enteredUnit } = parsed;
  return { ok: true, value, enteredUnit, freqHz: product?.freqHz ?? point.freqHz };
}

/** The reading that retyping a cell corrects: its newest one that counts. */
export function newestReading<R extends Pick<RunReading, 'testPointId' | 'voided'> & { readingNo: number }>(
  readings: readonly R[],
  testPointId: number,
): R | undefined {
  return readings
    .filter((reading) => reading.testPointId === testPointId && !reading.voided)
    .sort((a, b) => b.readingNo - a.readingNo)[0];
}
