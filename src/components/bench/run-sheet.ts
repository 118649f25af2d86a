import { BAND_KEYS, bandLabel } from '~/domain/bench/bands';
import { efficiency } from '~/domain/bench/derived';
import { formatAtMeter, formatNumber, formatUncertainty, formatValue } from '~/domain/bench/format';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { judgeRun } from '~/domain/bench/judge-run';
import { limitDbc } from '~/domain/bench/limit-rules';
import { compareQuantities } from '~/domain/bench/quantities';
import type { Quantity } from '~/domain/bench/quantities';
import { newestReading, readCell } from '~/domain/bench/run-entry';
import type { CellResult } from '~/domain/bench/run-entry';
import type { RunResult } from '~/domain/bench/run-result';
import type { InstrumentSpec, PathSpec } from '~/domain/bench/types';
import type { Station, StationReading } from '~/schemas/bench-station';

export type Point = Station['sheet']['points'][number];

/** An instrument or a path that can be chosen. */
export interface Choice<Spec> {
  revisionId: number;
  number: string;
  name: string;
  spec: Spec;
}

export interface Equipment {
  instruments: Choice<InstrumentSpec>[];
  paths: Choice<PathSpec>[];
}

/** An entry on its way to the server, as the browser keeps it until the server has it. */
export interface Entry {
  testPointId: number;
  text: string;
  columnUnit?: string | undefined;
  again: boolean;
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
  confirmed: boolean;
  attenuationHeld: boolean;
  version: number;
}

/** One row of the grid: a band, or what is measured once for the whole unit. */
export interface GridRow {
  key: string;
  label: string;
  /** By column; undefined where the plan has no such point. */
  cells: (Point | undefined)[];
  /** The row's cells are not of the column's quantity, and name their own. */
  isLabelled: boolean;
}

export interface Grid {
  columns: Quantity[];
  rows: GridRow[];
}

/** Bands down, quantities across, in the order of the plan; what has no band stands in rows beneath. */
export function gridOf(points: readonly Point[]): Grid {
  const banded = points.filter(({ band }) => band !== null);
  const columns = [
    ...new Map(
      (banded.length > 0 ? banded : points).map(({ quantity }) => [quantity.key, quantity]),
    ).values(),
  ].sort(compareQuantities);
  const bands = [...new Set(banded.flatMap(({ band }) => (band === null ? [] : [band])))];
  const rows = bands.flatMap((band) => {
    const own = banded.filter((point) => point.band === band);
    const depth = Math.max(
      ...columns.map(({ key }) => own.filter(({ quantity }) => quantity.key === key).length),
    );
    return Array.from({ length: depth }, (_, layer) => ({
      key: `${band} ${layer}`,
      label: bandLabel(band) + (layer === 0 ? '' : ` (${layer + 1})`),
      cells: columns.map(({ key }) => own.filter(({ quantity }) => quantity.key === key)[layer]),
      isLabelled: false,
    }));
  });
  const whole = points.filter(({ band }) => band === null);
  const unitRows = Array.from({ length: Math.ceil(whole.length / columns.length) }, (_, row) => ({
    key: `unit ${row}`,
    label: 'Unit',
    cells: columns.map((_column, column) => whole[row * columns.length + column]),
    isLabelled: true,
  }));
  return { columns, rows: [...rows, ...unitRows] };
}

/** Whether a point is typed or loaded; one whose quantity has a formula follows from others. */
export function isRead({ quantity }: Point): boolean {
  return quantity.formula === null;
}

/** Ids of the points in the order in which Enter goes on; what is of the whole unit comes last, what is computed is passed. */
export function entryOrder({ columns, rows }: Grid, by: 'quantity' | 'band'): number[] {
  const bands = rows.filter(({ isLabelled }) => !isLabelled);
  const whole = rows.filter(({ isLabelled }) => isLabelled).flatMap(({ cells }) => cells);
  const cells =
    by === 'band'
      ? bands.flatMap((row) => row.cells)
      : columns.flatMap((_, column) => bands.map((row) => row.cells[column]));
  return [...cells, ...whole].flatMap((point) => (point !== undefined && isRead(point) ? [point.id] : []));
}

/** The next cell in a direction that is typed into; the same one at the edge. */
export function neighbour(
  { rows }: Grid,
  pointId: number,
  direction: { rows: number; columns: number },
): number {
  let row = rows.findIndex((each) => each.cells.some((point) => point?.id === pointId));
  let column = rows[row]?.cells.findIndex((point) => point?.id === pointId) ?? -1;
  for (;;) {
    row += direction.rows;
    column += direction.columns;
    const cells = rows[row]?.cells;
    if (cells === undefined || column < 0 || column >= cells.length) return pointId;
    const found = cells[column];
    if (found !== undefined && isRead(found)) return found.id;
  }
}

/** The unit that a column remembers: of its newest typed entry, else the quantity's own. */
export function columnUnitOf(readings: readonly StationReading[], quantity: Quantity): string | undefined {
  const typed = readings
    .filter((reading) => reading.quantityKey === quantity.key && reading.source === 'typed')
    .sort((a, b) => (a.at < b.at ? 1 : -1))[0];
  return typed?.enteredUnit ?? quantity.defaultUnit ?? undefined;
}

/** What may be typed into a column, shown in its empty cells. */
export function unitHint(quantity: Quantity): string {
  if (quantity.formula !== null) return '';
  switch (quantity.format) {
    case 'power':
      return 'dBm or W';
    case 'ratio':
      return quantity.key === 'spurious' ? 'dBc @ MHz' : 'dBc or dBm';
    case 'current':
      return 'mA or A';
    case 'frequency_error':
      return 'Hz';
    case 'yes_no':
      return 'yes or no';
    case 'level':
    case 'voltage':
    case 'frequency':
    case 'time':
    case 'temperature':
    case 'percent':
    case 'number':
      return quantity.entryUnits.join(' or ');
  }
}

/** Reads an entry as the server will. */
export function readEntry(station: Station, equipment: Equipment, point: Point, entry: Entry): CellResult {
  const path = pathOf(station, equipment, entry.pathRevisionId);
  const instrument = equipment.instruments.find(
    ({ revisionId }) => revisionId === entry.instrumentRevisionId,
  );
  return readCell(
    point,
    { ...entry, path, detector: instrument?.spec.detector ?? null },
    {
      readings: station.sheet.readings,
      ratedPowerW: station.unit.ratedPowerW,
      loadOhm: station.plan.loadOhm,
    },
  );
}

function pathOf(station: Station, { paths }: Equipment, revisionId: number | null): PathSpec | null {
  const chosen = paths.find((path) => path.revisionId === revisionId)?.spec;
  return chosen ?? station.sheet.readings.find((one) => one.pathRevisionId === revisionId)?.path ?? null;
}

/** The sheet as it will be once an entry is taken; as it is where the entry cannot be read. */
export function withEntry(station: Station, equipment: Equipment, entry: Entry): Station {
  const { readings, points } = station.sheet;
  const point = points.find(({ id }) => id === entry.testPointId);
  if (point === undefined) return station;
  const read = readEntry(station, equipment, point, { ...entry, confirmed: true });
  if (!read.ok) return station;
  const corrected = entry.again ? undefined : newestReading(readings, point.id);
  const instrument = equipment.instruments.find((each) => each.revisionId === entry.instrumentRevisionId);
  const path = equipment.paths.find((each) => each.revisionId === entry.pathRevisionId);
  const taken: StationReading = {
    id: corrected?.id ?? -point.id,
    testPointId: point.id,
    readingNo: corrected?.readingNo ?? nextNo(readings, point.id),
    quantityKey: point.quantity.key,
    band: point.band,
    freqHz: read.freqHz,
    enteredText: entry.text,
    enteredUnit: read.enteredUnit,
    value: read.value,
    voided: false,
    voidReason: null,
    atMost: false,
    attenuationHeld: entry.attenuationHeld,
    source: 'typed',
    instrumentRevisionId: entry.instrumentRevisionId,
    pathRevisionId: entry.pathRevisionId,
    instrumentNumber: instrument?.number ?? null,
    pathNumber: path?.number ?? null,
    instrument: instrument?.spec ?? null,
    path: path?.spec ?? null,
    at: '9999',
    version: corrected?.version ?? 0,
  };
  const others = readings.filter((reading) => reading !== corrected);
  return { ...station, sheet: { ...station.sheet, readings: [...others, taken] } };
}

function nextNo(readings: readonly StationReading[], pointId: number): number {
  const numbers = readings
    .filter(({ testPointId }) => testPointId === pointId)
    .map(({ readingNo }) => readingNo);
  return 1 + Math.max(0, ...numbers);
}

export interface Judged {
  judgements: Map<number, PointJudgement>;
  result: RunResult;
}

/** Judges the sheet; a closed run shows what it kept. */
export function judgeStation(station: Station): Judged {
  const { judgements, result } = judgeRun(station.sheet);
  for (const {
    testPointId,
    verdict,
    value,
    U,
    k,
    n,
    lower,
    upper,
    ruleKey,
    ruleText,
    pConform,
  } of station.kept) {
    const computed = judgements.get(testPointId);
    if (computed === undefined) continue;
    const kept = { verdict, value, U, k, n, lower, upper, ruleKey, ruleText, pConform };
    judgements.set(testPointId, { ...computed, ...kept });
  }
  return { judgements, result };
}

/**
 * `need −47.9`, `within ±100`: what a point asks for, as short as a cell.
 *
 * @param emptyLimit limit of a ratio that has not been read yet, by the power of its band
 */
export function needOf(
  point: Point,
  judgement: PointJudgement | undefined,
  emptyLimit: number | null = null,
): string {
  const { quantity } = point;
  const lower = judgement?.lower ?? point.lower;
  const upper = judgement?.upper ?? emptyLimit ?? point.upper;
  if (quantity.format === 'yes_no') return 'need yes';
  if (quantity.format === 'ratio') {
    return upper === null ? 'limit by the power' : `need ${formatNumber(upper, 1)}`;
  }
  if (lower !== null && upper !== null) {
    return lower === -upper
      ? `within ±${formatNumber(upper, 0)}`
      : rangeText(bare(lower, quantity), bare(upper, quantity));
  }
  if (lower !== null) return `min ${bare(lower, quantity)}`;
  return upper === null ? 'no limit' : `max ${bare(upper, quantity)}`;
}

/** `4.00 to 5.50 W`: a unit that both have is said once. */
function rangeText(lower: string, upper: string): string {
  const [, unit = ''] = upper.split(' ');
  return `${lower.endsWith(` ${unit}`) ? lower.slice(0, -unit.length - 1) : lower} to ${upper}`;
}

/** The limit of a harmonic by the power measured on its band; null where that is not known. */
export function emptyLimitOf(
  point: Point,
  { sheet }: Station,
  all: ReadonlyMap<number, PointJudgement>,
): number | null {
  const { order } = point.quantity;
  const power = sheet.points.find((each) => each.band === point.band && each.quantity.key === 'rf_power');
  const powerW = power === undefined ? null : (all.get(power.id)?.value ?? null);
  if (point.limitRule !== 'spurious' || order === null || powerW === null || point.freqHz === null)
    return null;
  const args = { powerW, txFreqHz: point.freqHz, productFreqHz: order * point.freqHz };
  const limit = limitDbc(sheet.rule, args);
  if (!limit.ok) return null;
  return point.upper === null ? limit.limitDbc : Math.min(point.upper, limit.limitDbc);
}

function bare(value: number, quantity: Quantity): string {
  return formatValue(value, quantity).replace('+', '');
}

/** Whether the owner lets a missed point go: of an open run as it stands, of a closed one as it was kept. */
function isConceded(point: Point, judgement: PointJudgement | undefined, { sheet, kept }: Station): boolean {
  const isMissed = judgement?.verdict === 'fail' || judgement?.verdict === 'too_close';
  const keptPoint = kept.find(({ testPointId }) => testPointId === point.id);
  if (keptPoint !== undefined) return keptPoint.concession !== null;
  return isMissed && sheet.concessions.some(({ testPointId }) => testPointId === point.id);
}

/** Beneath the need: the meter for powers, efficiency for currents, how many readings. */
export function notesOf(
  point: Point,
  judgement: PointJudgement | undefined,
  station: Station,
  all: ReadonlyMap<number, PointJudgement>,
): string[] {
  const notes = isConceded(point, judgement, station) ? ['let go by concession'] : [];
  if (judgement === undefined || judgement.atMeter === null) return notes;
  if (point.quantity.key === 'rf_power') {
    notes.push(`${formatAtMeter(judgement.atMeter, point.quantity)} at meter`);
  }
  if (point.quantity.key === 'current_key_down' && judgement.value !== null) {
    const share = efficiencyOf(point, judgement.value, station, all);
    if (share !== null) notes.push(`η ${formatNumber(share * 100, 1)} %`);
  }
  if (judgement.n > 1) notes.push(`n = ${judgement.n}`);
  return notes;
}

function efficiencyOf(
  point: Point,
  currentA: number,
  { sheet }: Station,
  all: ReadonlyMap<number, PointJudgement>,
): number | null {
  const power = sheet.points.find((each) => each.band === point.band && each.quantity.key === 'rf_power');
  const powerW = power === undefined ? null : (all.get(power.id)?.value ?? null);
  const { supplyV } = sheet.context;
  if (powerW === null || supplyV === null || currentA <= 0) return null;
  return efficiency(powerW, supplyV, currentA);
}

/** `±0.9 dB (k = 2)`; a power in dB, because its uncertainty is. */
export function uncertaintyText({ U, k, uUnit }: PointJudgement, { format }: Quantity): string {
  if (U === null || uUnit === null) return '';
  const size = formatUncertainty(U, uUnit, format);
  return `±${size} (k = ${k === null ? '?' : formatNumber(k, k === 2 ? 0 : 2)})`;
}

/** A value with its unit apart, for the large figure. */
export function splitValue(value: number, quantity: Quantity): { figure: string; unit: string } {
  const text = formatValue(value, quantity);
  const at = text.lastIndexOf(' ');
  return at < 0 ? { figure: text, unit: '' } : { figure: text.slice(0, at), unit: text.slice(at + 1) };
}

/** `20 m` for a band as it is stored. */
export function asBandLabel(band: string): string {
  return BAND_KEYS.some((key) => key === band) ? band.replace('m', ' m') : band;
}
