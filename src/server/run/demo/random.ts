/** Numbers that look random and are the same at every run with the same seed. */
export interface Random {
  /** From 0 up to, not including, 1. */
  next(): number;
  between(low: number, high: number): number;
  /** A whole number, both ends included. */
  whole(low: number, high: number): number;
  /** Around 0 with a standard deviation of 1. */
  normal(): number;
  chance(probability: number): boolean;
  pick<T>(from: readonly T[]): T;
}

/** A generator (mulberry32) from a 32-bit seed. */
export function seededRandom(seed: number): Random {
  let state = seed >>> 0;
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
  const whole = (low: number, high: number) => low + Math.floor(next() * (high - low + 1));
  return {
    next,
    between: (low, high) => low + next() * (high - low),
    whole,
    normal: () => {
      // Twelve uniform numbers have a variance of 1; their sum is near enough to normal, and never far out.
      let sum = -6;
      for (let count = 0; count < 12; count += 1) sum += next();
      return sum;
    },
    chance: (probability) => next() < probability,
    pick: (from) => {
      const found = from[whole(0, from.length - 1)];
      if (found === undefined) throw new Error('There is nothing to pick from.');
      return found;
    },
  };
}
