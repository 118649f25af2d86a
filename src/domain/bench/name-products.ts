import { formatFrequency } from './format';
import { reachOf } from './frequency-plan';
import type { BandPlan, PlanSpacing } from './frequency-plan';
import { inText, ordinal, placer, productsOf } from './plan-products';
import type { Place, PlanProduct } from './plan-products';

/** What a peak is, as far as it can be told. */
export interface ProductName {
  kind: PlanProduct['kind'] | 'supply' | 'clock' | 'unexplained';
  /** `local oscillator leak`, `VFO + 2 × BFO`, `unexplained`. */
  name: string;
  /** Of a product of the oscillators; of a line beside another, one more than the times its spacing fits. */
  order: number | null;
  /** Where it should lie, Hz. */
  predictedHz: number | null;
}

/** A line of the sweep that others may stand beside. */
interface KnownLine {
  name: string;
  freqHz: number;
}

/** What is known of a sweep when its peaks are named. */
export interface Naming {
  plan: BandPlan | null;
  carrierHz: number;
  /** Half-width of what may be one line, by resolution bandwidth and points, Hz. */
  toleranceHz: number;
}

const UNEXPLAINED: ProductName = {
  kind: 'unexplained',
  name: 'unexplained',
  order: null,
  predictedHz: null,
};

/** Ripple of rectified mains, which every supply may have; common practice. */
const MAINS: readonly PlanSpacing[] = [
  { kind: 'supply', name: 'supply ripple', spacingHz: 100 },
  { kind: 'supply', name: 'supply ripple', spacingHz: 120 },
];
/** A line stands at most so many spacings beside another. */
const MOST_SPACINGS = 9;
/** Harmonics of the carrier beyond the tenth are named as such up to here. */
const HIGHEST_HARMONIC = 30;

const isBetter = (one: ProductName, than: ProductName | null, freqHz: number): boolean => {
  if (than?.order === null || than === null) return true;
  const order = one.order ?? Infinity;
  if (order !== than.order) return order < than.order;
  return Math.abs((one.predictedHz ?? 0) - freqHz) < Math.abs((than.predictedHz ?? 0) - freqHz);
};

/** Names the peaks of a sweep; made once for all of them. */
export function productNamer({ plan, carrierHz, toleranceHz }: Naming): (freqHz: number) => ProductName {
  const placed: { product: PlanProduct; place: Place }[] = [];
  if (plan !== null) {
    const place = placer(plan, carrierHz);
    for (const product of productsOf(plan)) placed.push({ product, place: place(product.mix) });
  }
  const spacings = [...(plan?.spacings ?? []), ...MAINS].filter(
    ({ spacingHz }) => spacingHz > 2 * toleranceHz,
  );
  const lines = Array.from({ length: HIGHEST_HARMONIC }, (_, index) => ({
    name: index === 0 ? 'the carrier' : `the ${ordinal(index + 1)} harmonic`,
    freqHz: (index + 1) * carrierHz,
  }));

  return (freqHz) => {
    const harmonic = Math.round(freqHz / carrierHz);
    if (harmonic >= 2 && harmonic <= HIGHEST_HARMONIC) {
      const predictedHz = harmonic * carrierHz;
      if (Math.abs(freqHz - predictedHz) <= toleranceHz) {
        return { kind: 'harmonic', name: `${ordinal(harmonic)} harmonic`, order: harmonic, predictedHz };
      }
    }
    let best: ProductName | null = null;
    for (const { product, place } of placed) {
      if (best?.order !== undefined && best.order !== null && product.order > best.order) break;
      if (Math.abs(freqHz - place.centreHz) > toleranceHz + place.halfHz) continue;
      const { kind, name, order } = product;
      const found = { kind, name, order, predictedHz: place.centreHz };
      if (isBetter(found, best, freqHz)) best = found;
    }
    const spaced = bySpacing(freqHz, spacings, lines, toleranceHz);
    if (spaced !== null && (best === null || (spaced.order ?? 0) < (best.order ?? Infinity))) return spaced;
    return best ?? UNEXPLAINED;
  };
}

/** A line that a spacing explains: a clock's own harmonic, or one beside the carrier or a harmonic of it. */
function bySpacing(
  freqHz: number,
  spacings: readonly PlanSpacing[],
  lines: readonly KnownLine[],
  toleranceHz: number,
): ProductName | null {
  let best: ProductName | null = null;
  const offer = (found: ProductName): void => {
    if (Math.abs((found.predictedHz ?? 0) - freqHz) > toleranceHz) return;
    if (isBetter(found, best, freqHz)) best = found;
  };
  for (const { kind, name: called, spacingHz } of spacings) {
    const name = inText(called);
    const own = Math.round(freqHz / spacingHz);
    if (own >= 1 && own <= MOST_SPACINGS) {
      const text = own === 1 ? `${name} leak` : `${ordinal(own)} harmonic of the ${name}`;
      offer({ kind, name: text, order: own, predictedHz: own * spacingHz });
    }
    for (const line of lines) {
      const times = Math.round(Math.abs(freqHz - line.freqHz) / spacingHz);
      if (times < 1 || times > MOST_SPACINGS) continue;
      const side = freqHz > line.freqHz ? 1 : -1;
      const distance =
        times === 1 ? formatFrequency(spacingHz) : `${String(times)} × ${formatFrequency(spacingHz)}`;
      offer({
        kind,
        name: `${name}, ${distance} ${side > 0 ? 'above' : 'below'} ${line.name}`,
        order: times + 1,
        predictedHz: line.freqHz + side * times * spacingHz,
      });
    }
  }
  return best;
}

/** A sentence where the carrier does not lie where the plan says; null where it does. */
export function carrierOffPlan(plan: BandPlan, carrierHz: number, toleranceHz: number): string | null {
  const { lowHz, highHz } = reachOf(plan.carrier.mix, plan);
  if (carrierHz >= lowHz - toleranceHz && carrierHz <= highHz + toleranceHz) return null;
  const predicted =
    lowHz === highHz
      ? `at ${formatFrequency(lowHz)}`
      : `from ${formatFrequency(lowHz)} to ${formatFrequency(highHz)}`;
  return `The frequency plan has the carrier ${predicted}, not at ${formatFrequency(carrierHz)}: names of products may be wrong. Look at the plan.`;
}
