import { mismatchLimitsDb } from './mismatch';
import { pathLoss } from './paths';
import type { UncertaintyUnit } from './format';
import type { Quantity } from './quantities';
import type {
  InstrumentSpec,
  PathPart,
  PathSpec,
  QuantitySpec,
  SpecHalfWidth,
  UncertaintyComponent,
} from './types';
import { combine, component } from './uncertainty';
import type { Combined } from './uncertainty';

/** The analyser's own products must lie at least this far under the reading for a budget to be stated. */
const OWN_DISTORTION_CLEARANCE_DB = 6;

/** A budget in `unit`, with its sum. */
interface Budget extends Combined {
  unit: UncertaintyUnit;
  components: UncertaintyComponent[];
}

/** What a budget is built from. */
interface BudgetInput {
  quantity: Quantity;
  /** At the meter, in the unit of the quantity. */
  value: number;
  /** Transmit frequency, Hz. */
  freqHz: number | null;
  /** Frequency of the product, Hz, for ratios. */
  productFreqHz: number | null;
  instrument: InstrumentSpec;
  path: PathSpec | null;
  unitVswr: number | null;
  /** True where the ratio was shown to hold with 10 dB more attenuation. */
  attenuationHeld: boolean;
  /** Lines that come from elsewhere: repeatability, the limit's own uncertainty. */
  extra: readonly UncertaintyComponent[];
}

/** Key under which an instrument's specification covers every ratio. */
const ANY_HARMONIC = 'harmonic';

function specOf(instrument: InstrumentSpec, quantity: Quantity): QuantitySpec | undefined {
  const own = instrument.quantities[quantity.key];
  return own ?? (quantity.unit === 'dBc' ? instrument.quantities[ANY_HARMONIC] : undefined);
}

/** A relative change in power as dB, at first order: 10/ln 10 dB each. */
const DB_PER_NEPER = 10 / Math.LN10;

const LEVEL_UNITS: ReadonlySet<Quantity['unit']> = new Set(['W', 'dBc', 'dBm', 'dB']);

/**
 * A stated half-width in the unit of the budget; null where the unit does not fit the quantity.
 */
function inBudgetUnit(spec: SpecHalfWidth, quantity: Quantity, input: BudgetInput): number | null {
  const { halfWidth, unit } = spec;
  const size = Math.abs(input.value);
  if (unit === 'dB') return LEVEL_UNITS.has(quantity.unit) ? halfWidth : null;
  if (quantity.unit === 'W') {
    if (unit === 'percent') return DB_PER_NEPER * (halfWidth / 100);
    if (unit === 'ppm') return DB_PER_NEPER * (halfWidth / 1e6);
    return unit === 'unit' && size > 0 ? DB_PER_NEPER * (halfWidth / size) : null;
  }
  // A share of a level in dB, or of an absolute temperature, is not what a data sheet means.
  if (LEVEL_UNITS.has(quantity.unit) || quantity.unit === 'K') return unit === 'unit' ? halfWidth : null;
  if (quantity.unit === 'Hz') {
    if (unit === 'ppm') return input.freqHz === null ? null : (halfWidth / 1e6) * input.freqHz;
    return unit === 'Hz' || unit === 'unit' ? halfWidth : null;
  }
  if (unit === 'percent') return (halfWidth / 100) * size;
  if (unit === 'ppm') return (halfWidth / 1e6) * size;
  return unit === 'unit' ? halfWidth : null;
}

/** Names and standing wave ratios from the unit to the instrument, for the joints between neighbours. */
function jointMismatches(input: BudgetInput, suffix: string): UncertaintyComponent[] {
  const chain = [
    { name: 'unit', vswr: input.unitVswr },
    ...(input.path?.parts ?? []),
    { name: 'instrument', vswr: input.instrument.vswr },
  ];
  const lines: UncertaintyComponent[] = [];
  for (let index = 1; index < chain.length; index += 1) {
    const a = chain[index - 1];
    const b = chain[index];
    if (a === undefined || b === undefined || a.vswr === null || b.vswr === null) continue;
    // The minus side is the larger one; a half-width must not be smaller than either.
    const { minusDb } = mismatchLimitsDb(a.vswr, b.vswr);
    if (minusDb !== 0)
      lines.push(component(`Mismatch, ${a.name} to ${b.name}${suffix}`, minusDb, 'u-shaped'));
  }
  return lines;
}

/** Specification, calibration and resolution of the instrument for an absolute reading. */
function instrumentLines(quantity: Quantity, spec: QuantitySpec, input: BudgetInput): UncertaintyComponent[] {
  const lines: UncertaintyComponent[] = [];
  for (const each of spec.accuracy) {
    const halfWidth = inBudgetUnit(each, quantity, input);
    if (halfWidth !== null) lines.push(component('Instrument specification', halfWidth, 'rectangular'));
  }
  const { calibration } = input.instrument;
  if (calibration !== null) {
    const expanded = inBudgetUnit(
      { halfWidth: calibration.expanded, unit: calibration.unit },
      quantity,
      input,
    );
    if (expanded !== null) lines.push(component('Calibration', expanded, 'normal', { k: calibration.k }));
  }
  return lines;
}

function resolutionLines(
  quantity: Quantity,
  spec: QuantitySpec | undefined,
  input: BudgetInput,
  names: readonly string[],
): UncertaintyComponent[] {
  if (spec === undefined || spec.resolution === null) return [];
  const step = inBudgetUnit(spec.resolution, quantity, input);
  return step === null ? [] : names.map((name) => component(name, step / 2, 'rectangular'));
}

/**
 * What stays of a path's uncertainty in a ratio: its stated flatness; without one, nothing where the part
 * loses the same at both frequencies, and the whole uncertainty where the table corrects the ratio.
 */
function pathLineInRatio(part: PathPart, input: BudgetInput): UncertaintyComponent | null {
  if (part.flatnessDb !== null)
    return component(`${part.name}, flatness`, part.flatnessDb, 'normal', { k: part.k });
  if (input.freqHz === null || input.productFreqHz === null) {
    return component(`${part.name}, frequency unknown`, part.uncertaintyDb, 'normal', { k: part.k });
  }
  const alone = { direction: 'to_instrument' as const, parts: [part] };
  const carrier = pathLoss(alone, input.freqHz);
  const product = pathLoss(alone, input.productFreqHz);
  if (carrier.ok && product.ok && carrier.lossDb === product.lossDb) return null;
  return component(`${part.name}, loss difference`, part.uncertaintyDb, 'normal', { k: part.k });
}

/**
 * The analyser's own product, x dB under the one read, moves the reading by 20·lg(1 ± 10^(−x/20)); with the
 * phase unknown the larger side is taken as the half-width of a U-shaped distribution.
 */
function ownDistortion(
  input: BudgetInput,
): { ok: true; lines: UncertaintyComponent[] } | { ok: false; reason: string } {
  if (input.attenuationHeld) return { ok: true, lines: [] };
  const own = input.instrument.ownDistortionDbc;
  if (own === null) {
    return {
      ok: false,
      reason:
        "The analyser's own distortion is not stated. State it, or show that the ratio holds with 10 dB more attenuation.",
    };
  }
  const x = input.value - own;
  if (x < OWN_DISTORTION_CLEARANCE_DB) {
    return {
      ok: false,
      reason:
        "The analyser's own distortion may make up this reading. Show that the ratio holds with 10 dB more attenuation.",
    };
  }
  const halfWidth = 20 * Math.log10(1 - 10 ** (-x / 20));
  return { ok: true, lines: [component("Analyser's own distortion", halfWidth, 'u-shaped')] };
}

type LinesResult = { ok: true; lines: UncertaintyComponent[] } | { ok: false; reason: string };

function ratioLines(quantity: Quantity, input: BudgetInput): LinesResult {
  const { instrument, path } = input;
  if (instrument.linearityDb === null || instrument.flatnessDb === null) {
    const missing = instrument.linearityDb === null ? 'linearity' : 'flatness';
    return {
      ok: false,
      reason: `The ${missing} of the instrument is not stated, so a ratio has no uncertainty.`,
    };
  }
  const distortion = ownDistortion(input);
  if (!distortion.ok) return distortion;
  const lines = [
    component('Linearity', instrument.linearityDb, 'rectangular'),
    component('Flatness', instrument.flatnessDb, 'rectangular'),
  ];
  for (const part of path?.parts ?? []) {
    const line = pathLineInRatio(part, input);
    if (line !== null) lines.push(line);
  }
  lines.push(...jointMismatches(input, ', at the carrier'), ...jointMismatches(input, ', at the product'));
  const names = ['Resolution, carrier', 'Resolution, product'];
  lines.push(...resolutionLines(quantity, specOf(instrument, quantity), input, names), ...distortion.lines);
  return { ok: true, lines };
}

function absoluteLines(quantity: Quantity, input: BudgetInput): LinesResult {
  const spec = specOf(input.instrument, quantity);
  if (spec === undefined) {
    return { ok: false, reason: `The instrument has no specification for ${quantity.label.toLowerCase()}.` };
  }
  const lines = instrumentLines(quantity, spec, input);
  if (lines.length === 0) {
    return {
      ok: false,
      reason: `The accuracy of the instrument for ${quantity.label.toLowerCase()} is not stated in a unit that fits.`,
    };
  }
  if (quantity.path !== 'none') {
    for (const part of input.path?.parts ?? []) {
      lines.push(component(part.name, part.uncertaintyDb, 'normal', { k: part.k }));
    }
    lines.push(...jointMismatches(input, ''));
  }
  lines.push(...resolutionLines(quantity, spec, input, ['Resolution']));
  return { ok: true, lines };
}

/** Unit of the uncertainty of what is read: dB for levels; null for a yes or no. */
function uncertaintyUnit({ unit }: Quantity): UncertaintyUnit | null {
  switch (unit) {
    case '':
      return null;
    case 'W':
    case 'dBc':
    case 'dBm':
    case 'dB':
      return 'dB';
    case '1':
    case 'A':
    case 'V':
    case 'Hz':
    case 's':
    case 'K':
      return unit;
  }
}

/**
 * Uncertainty budget of a reading: dB for powers and ratios, otherwise the SI unit. In a ratio the level
 * calibration and the flat loss of the path cancel; linearity, flatness, mismatch at both frequencies and the
 * analyser's own distortion stay. Refuses where a figure that it needs is not stated.
 */
export function buildBudget(input: BudgetInput): ({ ok: true } & Budget) | { ok: false; reason: string } {
  const { quantity } = input;
  const unit = uncertaintyUnit(quantity);
  if (unit === null) return { ok: false, reason: 'This quantity has no uncertainty budget.' };
  const built = quantity.unit === 'dBc' ? ratioLines(quantity, input) : absoluteLines(quantity, input);
  if (!built.ok) return built;
  const components = [...built.lines, ...input.extra];
  return { ok: true, unit, components, ...combine(components) };
}
