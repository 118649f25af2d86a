import type { RunPlan } from './bench';
import type { BuiltTo, Remedy } from './floor';

/** What becomes of a unit. */
export interface Fate {
  builtTo: BuiltTo | 'waiting';
  runs: readonly RunPlan[];
  /** After each failed run; one less than the failed runs where the last is still in rework. */
  remedies: readonly Remedy[];
  end: 'certified' | 'packed' | 'gone' | 'none';
  /** Minutes before now at which its only run is opened, where it is the one on the bench. */
  openedMinutesAgo?: number;
  hold?: string;
}

const passes: RunPlan = { fault: null };
const weakFilter: RunPlan = { fault: { kind: 'fail', quantityKey: 'harmonic_2', band: '20m' } };
const tooClose: RunPlan = { fault: { kind: 'too_close', quantityKey: 'harmonic_2', band: '20m' } };

const lowPassTurns: Remedy = {
  cause: 'Low-pass coil has a wrong number of turns',
  text: 'L302 had 13 turns, rewound to 12.',
  ...{ minutes: 35, stepAgain: 'Wind the toroids' },
};
const lowPassCapacitor: Remedy = {
  cause: 'Low-pass capacitor of a wrong value',
  text: 'C311 was 330 pF instead of 220 pF; exchanged.',
  minutes: 22,
};
const lowPower: RunPlan = { fault: { kind: 'fail', quantityKey: 'rf_power', band: '30m' } };
const outputStage: Remedy = {
  cause: 'Output transistor is weak or damaged',
  text: 'Output transistor Q9 leaked at the gate; replaced, and its pad with it.',
  ...{ minutes: 42, place: 'Q9' },
};
const thirsty: RunPlan = { fault: { kind: 'fail', quantityKey: 'current_key_down', band: '40m' } };
const outputTransformer: Remedy = {
  cause: 'Output transformer has a wrong number of turns',
  text: 'T2 of the output stage had one turn too few; rewound.',
  ...{ minutes: 28, stepAgain: 'Wind the toroids' },
};

const gone: Fate = { builtTo: 'built', runs: [passes], remedies: [], end: 'gone' };
const certified: Fate = { ...gone, end: 'certified' };
const built: Fate = { builtTo: 'built', runs: [], remedies: [], end: 'none' };
const waiting: Fate = { ...built, builtTo: 'waiting' };

/** Twenty units, all gone; the weak second harmonic on 20 m is what revision B of the BOM cures. */
export const dispatchedFates: readonly Fate[] = [
  gone,
  gone,
  { ...gone, runs: [weakFilter, passes], remedies: [lowPassTurns] },
  gone,
  gone,
  { ...gone, runs: [{ fault: null, hasVoid: true }] },
  { ...gone, runs: [lowPower, passes], remedies: [outputStage] },
  gone,
  { ...gone, runs: [weakFilter, passes], remedies: [{ ...lowPassTurns, minutes: 25 }] },
  gone,
  gone,
  gone,
  { ...gone, runs: [tooClose, passes] },
  gone,
  gone,
  { ...gone, runs: [thirsty, passes], remedies: [outputTransformer] },
  gone,
  { ...gone, runs: [weakFilter, passes], remedies: [lowPassCapacitor] },
  gone,
  gone,
];

/** Sixteen units in their final tests. */
export const testedFates: readonly Fate[] = [
  gone,
  { ...gone, runs: [weakFilter, passes], remedies: [{ ...lowPassTurns, minutes: 30 }] },
  { ...gone, runs: [weakFilter, passes], remedies: [lowPassTurns] },
  { ...gone, runs: [weakFilter, passes], remedies: [lowPassCapacitor] },
  { ...certified, end: 'packed' },
  certified,
  certified,
  certified,
  { ...certified, runs: [thirsty, passes], remedies: [outputTransformer] },
  { ...built, runs: [weakFilter] },
  { ...built, runs: [tooClose] },
  { ...built, runs: [{ fault: null, stopAfter: 11 }], openedMinutesAgo: 48 },
  { ...built, hold: 'The encoder skips now and then: waits for the new lot before it is tested.' },
  built,
  built,
  { ...built, runs: [lowPower], remedies: [outputStage] },
];

/** Fifteen units on the floor. */
export const floorFates: readonly Fate[] = [
  certified,
  certified,
  built,
  built,
  { ...built, builtTo: 'aligning' },
  { ...built, builtTo: 'aligning' },
  { ...built, builtTo: 'boards' },
  { ...built, builtTo: 'boards' },
  { ...built, builtTo: 'boards' },
  { ...built, builtTo: 'kitted' },
  { ...built, builtTo: 'kitted' },
  { ...built, builtTo: 'picking' },
  waiting,
  waiting,
  waiting,
];

/** Nine units that are only ordered. */
export const orderedFates: readonly Fate[] = Array<Fate>(9).fill(waiting);
