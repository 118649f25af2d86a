import { orderOf } from './frequency-plan';
import type { BandPlan, Mix } from './frequency-plan';

/** Highest order of a product that is looked for. */
export const MAX_ORDER = 9;
/** Up to so many signals all their products are looked for; of more, those of three of them. */
const FEW_SIGNALS = 5;
const OF_MANY = 3;

/** A product of the oscillators with its name. */
export interface PlanProduct {
  kind: 'leak' | 'image' | 'harmonic' | 'mix';
  name: string;
  /** How many signals it is made of, each counted as often as it enters. */
  order: number;
  mix: Mix;
}

/** Where a product lies: somewhere within ± `halfHz` of the centre. */
export interface Place {
  centreHz: number;
  halfHz: number;
}

/** An oscillator or a stage, as products are made of it. */
interface Signal {
  symbol: string;
  name: string;
  mix: Mix;
}

/** `2nd`, `3rd`, `11th`. */
export function ordinal(count: number): string {
  const isTeen = count % 100 >= 11 && count % 100 <= 13;
  const ending = isTeen ? undefined : ['th', 'st', 'nd', 'rd'][count % 10];
  return `${String(count)}${ending ?? 'th'}`;
}

/** A name inside a sentence: `local oscillator`, but `VFO` stays. */
export function inText(name: string): string {
  const [first = '', second = ''] = name;
  return second === second.toLowerCase() ? first.toLowerCase() + name.slice(1) : name;
}

const isSame = (a: Mix, b: Mix): boolean =>
  a.every((each, index) => each === b[index]) || a.every((each, index) => each === -(b[index] ?? NaN));

/** Whether a mix is the carrier or a whole multiple of it. */
function isOfCarrier(mix: Mix, carrier: Mix): boolean {
  const at = carrier.findIndex((each) => each !== 0);
  const times = (mix[at] ?? 0) / (carrier[at] ?? 1);
  return (
    Number.isInteger(times) &&
    times !== 0 &&
    mix.every((each, index) => each === times * (carrier[index] ?? 0))
  );
}

function signalsOf({ oscillators, stages }: BandPlan): Signal[] {
  return [
    ...oscillators.map(({ symbol, name }, index) => ({
      ...{ symbol, name },
      mix: oscillators.map((_, place) => (place === index ? 1 : 0)),
    })),
    ...stages.map(({ symbol, name, mix }) => ({ symbol, name, mix })),
  ];
}

/** `VFO + 2 × BFO`: what is added first. */
function sumText(counts: readonly number[], signals: readonly Signal[]): string {
  const parts = counts.flatMap((times, index) => {
    const symbol = signals[index]?.symbol ?? '';
    const size = Math.abs(times);
    return times === 0
      ? []
      : [{ isAdded: times > 0, text: size === 1 ? symbol : `${String(size)} × ${symbol}` }];
  });
  return [...parts.filter(({ isAdded }) => isAdded), ...parts.filter(({ isAdded }) => !isAdded)]
    .map(({ isAdded, text }, index) => (index === 0 ? text : `${isAdded ? '+' : '−'} ${text}`))
    .join(' ');
}

function named(counts: readonly number[], mix: Mix, plan: BandPlan, signals: readonly Signal[]): PlanProduct {
  const order = orderOf(counts);
  const used = counts.flatMap((times, index) => (times === 0 ? [] : [{ times: Math.abs(times), index }]));
  const [only, ...more] = used;
  const signal = only === undefined || more.length > 0 ? undefined : signals[only.index];
  if (signal !== undefined && only !== undefined) {
    return only.times === 1
      ? { kind: 'leak', name: `${inText(signal.name)} leak`, order, mix }
      : {
          kind: 'harmonic',
          name: `${ordinal(only.times)} harmonic of the ${inText(signal.name)}`,
          order,
          mix,
        };
  }
  if (plan.carrier.image !== null && isSame(mix, plan.carrier.image)) {
    return { kind: 'image', name: 'image', order, mix };
  }
  const stage = plan.stages.find(({ image }) => image !== null && isSame(mix, image));
  if (stage !== undefined) return { kind: 'image', name: `image of the ${inText(stage.name)}`, order, mix };
  return { kind: 'mix', name: sumText(counts, signals), order, mix };
}

/**
 * Every product |m·f₁ ± n·f₂ ± …| of a plan's oscillators and stages up to an order, lowest first, without the
 * carrier and its harmonics. One that comes about in two ways has the name of the lower order.
 */
export function productsOf(plan: BandPlan, maxOrder = MAX_ORDER): PlanProduct[] {
  const signals = signalsOf(plan);
  const most = signals.length <= FEW_SIGNALS ? signals.length : OF_MANY;
  const byOrder: number[][][] = Array.from({ length: maxOrder + 1 }, () => []);
  const counts = signals.map(() => 0);
  const walk = (at: number, left: number, used: number): void => {
    if (at === signals.length) {
      if (used > 0) byOrder[maxOrder - left]?.push([...counts]);
      return;
    }
    // A product and its negative are one: the first signal that enters counts as added.
    const lowest = used === 0 ? 0 : used < most ? -left : 0;
    const highest = used < most ? left : 0;
    for (let times = lowest; times <= highest; times += 1) {
      counts[at] = times;
      walk(at + 1, left - Math.abs(times), used + (times === 0 ? 0 : 1));
    }
    counts[at] = 0;
  };
  walk(0, maxOrder, 0);

  const seen = new Set<string>();
  return byOrder.flat().flatMap((each) => {
    const mix = plan.oscillators.map((_, place) =>
      each.reduce((sum, times, index) => sum + times * (signals[index]?.mix[place] ?? 0), 0),
    );
    const turned = (mix.find((one) => one !== 0) ?? 0) < 0 ? mix.map((one) => -one) : mix;
    const key = turned.join();
    if (seen.has(key) || orderOf(mix) === 0 || isOfCarrier(mix, plan.carrier.mix)) return [];
    seen.add(key);
    return [named(signFor(each, mix, plan), mix, plan, signals)];
  });
}

/** Signs by which a sum comes out above zero, as it is written. */
function signFor(counts: number[], mix: Mix, { oscillators }: BandPlan): number[] {
  const middle = mix.reduce((sum, times, index) => {
    const { lowHz = 0, highHz = 0 } = oscillators[index] ?? {};
    return sum + (times * (lowHz + highHz)) / 2;
  }, 0);
  return middle < 0 ? counts.map((times) => (times === 0 ? 0 : -times)) : counts;
}

/**
 * Where the products lie while the carrier has a frequency. It settles the oscillator of the carrier that tunes
 * most, so that its range no longer counts; the ranges of the others stay.
 *
 * @param carrierHz as it was measured; null leaves every oscillator its range
 */
export function placer({ oscillators, carrier }: BandPlan, carrierHz: number | null): (mix: Mix) => Place {
  const half = oscillators.map(({ lowHz, highHz }) => (highHz - lowHz) / 2);
  const middle = oscillators.map(({ lowHz, highHz }) => (highHz + lowHz) / 2);
  let settled = -1;
  for (const [index, times] of carrier.mix.entries()) {
    if (times !== 0 && (half[index] ?? 0) > (half[settled] ?? 0)) settled = index;
  }
  const times = carrier.mix[settled];
  if (carrierHz === null || times === undefined) settled = -1;
  const middleOf = (mix: Mix): number =>
    mix.reduce((sum, each, index) => sum + each * (middle[index] ?? 0), 0);
  const signedHz = middleOf(carrier.mix) < 0 ? -(carrierHz ?? 0) : (carrierHz ?? 0);

  return (mix) => {
    const share = settled < 0 ? 0 : (mix[settled] ?? 0) / (times ?? 1);
    let centreHz = share * signedHz;
    let halfHz = 0;
    for (const [index, each] of mix.entries()) {
      if (index === settled) continue;
      const left = each - share * (carrier.mix[index] ?? 0);
      centreHz += left * (middle[index] ?? 0);
      halfHz += Math.abs(left) * (half[index] ?? 0);
    }
    return { centreHz: Math.abs(centreHz), halfHz };
  };
}
