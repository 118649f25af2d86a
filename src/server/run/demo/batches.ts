import type { Fate } from './fates';
import { dispatchedFates, floorFates, orderedFates, testedFates } from './fates';
import type { DemoBuyer } from './buyers';
import { demoBuyer } from './people';
import type { Random } from './random';

/** An order as planned, before its buyer is drawn. */
export interface PlannedOrder {
  quantity: number;
  pay: 'full' | 'deposit';
  /** The rest is paid before dispatch. */
  paysBalance: boolean;
  buyer: Partial<DemoBuyer>;
  /** By the buyer who has an account with a password. */
  isOwn?: boolean;
  isAskedForBalance?: boolean;
}

/** One of the four batches. Days are counted from today. */
export interface BatchStory {
  slug: string;
  places: number;
  priceMinor: number;
  depositMinor: number | null;
  openedOn: number;
  estimatedOn: number;
  /** From and to when it is ordered. */
  ordered: readonly [number, number];
  /** Null until parts are issued and building begins. */
  issuedOn: number | null;
  /** The first kit, and days from kit to kit. */
  kits: readonly [number, number];
  closedOn: number | null;
  firmware: string;
  /** What all its rigs have in common; see `drawTraits`. */
  shift: number;
  orders: readonly PlannedOrder[];
  fates: readonly Fate[];
}

const plain: PlannedOrder = { quantity: 1, pay: 'full', paysBalance: true, buyer: {} };
const deposit: PlannedOrder = { ...plain, pay: 'deposit' };
const two: PlannedOrder = { ...plain, quantity: 2 };
const own: Partial<DemoBuyer> = { ...demoBuyer, country: 'GB' };

const longName: PlannedOrder = {
  ...plain,
  buyer: {
    name: 'Wilhelmina-Konstanze Freifrau von Ahrenstett-Quellmoor zu Niederthalbach und Obersilberwald, care of the Radio Section of the Eskerfield Field Naturalists’ and Amateur Astronomers’ Society',
    addressLines: [
      'Observatory Annexe, second courtyard',
      'behind the Old Mast House',
      '118b Beacon Hill Upper Terrace',
    ],
    country: 'DE',
  },
};

function times(count: number, order: PlannedOrder): PlannedOrder[] {
  return Array<PlannedOrder>(count).fill(order);
}

/** The four batches of the demo works, oldest first. */
export const batchStories: readonly BatchStory[] = [
  {
    ...{ slug: 'holm-3', places: 20, priceMinor: 38_900, depositMinor: null },
    ...{
      openedOn: -205,
      estimatedOn: -118,
      ordered: [-204, -170],
      issuedOn: -167,
      kits: [-165, 1.6],
      closedOn: -119,
    },
    ...{ firmware: '1.4', shift: 0.3, fates: dispatchedFates },
    orders: [
      two,
      ...times(4, plain),
      { ...plain, buyer: own, isOwn: true },
      ...times(3, plain),
      { ...plain, buyer: { country: 'AT' } },
      two,
      ...times(7, plain),
    ],
  },
  {
    ...{ slug: 'skerry-5', places: 16, priceMinor: 68_900, depositMinor: 15_000 },
    ...{
      openedOn: -150,
      estimatedOn: 6,
      ordered: [-149, -75],
      issuedOn: -46,
      kits: [-42, 2.3],
      closedOn: null,
    },
    ...{ firmware: '2.1', shift: -0.4, fates: testedFates },
    orders: [
      plain,
      deposit,
      plain,
      deposit,
      plain,
      longName,
      { ...deposit, paysBalance: false, buyer: own, isOwn: true, isAskedForBalance: true },
      { ...deposit, paysBalance: false },
      plain,
      ...times(3, deposit),
      plain,
      deposit,
      two,
    ],
  },
  {
    ...{ slug: 'voe-40', places: 18, priceMinor: 21_900, depositMinor: 8_000 },
    ...{
      openedOn: -80,
      estimatedOn: -9,
      ordered: [-79, -13],
      issuedOn: -17,
      kits: [-15, 1.2],
      closedOn: null,
    },
    ...{ firmware: '1.1', shift: 0.1, fates: floorFates },
    orders: [plain, plain, ...times(2, deposit), two, ...times(5, plain), ...times(4, deposit)],
  },
  {
    ...{ slug: 'holm-3', places: 20, priceMinor: 39_900, depositMinor: 10_000 },
    ...{ openedOn: -14, estimatedOn: 76, ordered: [-13, -1], issuedOn: null, kits: [0, 0], closedOn: null },
    ...{ firmware: '1.5', shift: 0, fates: orderedFates },
    orders: [plain, deposit, deposit, two, plain, deposit, deposit, plain],
  },
];

/** What a buyer of a model might choose. @param isLow whether it must be the three lower of four bands */
export function drawOptions(slug: string, isLow: boolean, random: Random): string[] {
  const chosen: string[] = [];
  if (slug === 'holm-3') {
    const bands =
      isLow || random.chance(0.6)
        ? ['40m', '30m', '20m']
        : random.pick([
            ['40m', '20m', '15m'],
            ['30m', '20m', '15m'],
            ['40m', '30m', '15m'],
          ]);
    chosen.push(...bands.map((band) => `band.${band}`));
  }
  if (slug !== 'voe-40' && random.chance(0.55)) chosen.push('filter.narrow');
  const hasKeyer = random.chance(0.45);
  if (hasKeyer) chosen.push('keyer.built-in');
  if (slug === 'skerry-5') {
    if (hasKeyer && random.chance(0.5)) chosen.push('keyer.memory');
    chosen.push(random.chance(0.3) ? 'socket.locking' : 'socket.barrel');
  }
  return chosen;
}
