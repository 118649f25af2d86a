import { evaluateCondition, parseCondition } from '~/domain/planning/condition';
import { suppliers } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';
import { countLot } from '~/server/services/stores/count-lot';
import { receiveLot } from '~/server/services/stores/receive-lot';
import { setLotState } from '~/server/services/stores/set-lot-state';
import type { Calendar } from './calendar';
import { demoBoms } from './boms';
import type { DemoPart } from './parts';
import { demoParts } from './parts';
import type { Cast } from './people';
import type { Scene } from './play';
import type { Random } from './random';

const demoSuppliers = [
  { name: 'Fennick Coil & Wire', email: 'orders@fennick.example', leadTimeDays: 12 },
  { name: 'Quillmark Boards', email: 'sales@quillmark.example', leadTimeDays: 24 },
  { name: 'Ostra Components', email: 'desk@ostra.example', leadTimeDays: 6 },
] as const;

/** Enters the suppliers; receipts name them. */
export async function addSuppliers(tx: Tx): Promise<void> {
  await tx.insert(suppliers).values([...demoSuppliers]);
}

/** Units of each model that the stock must do for, with something over. */
const unitsToBuild = { 'voe-40': 17, 'holm-3': 26, 'skerry-5': 17 } as const;
/** The dearer of the options is counted in; what bars another is not. */
const usual = new Set(
  'band.40m band.30m band.20m band.15m filter.narrow keyer.built-in keyer.memory socket.locking socket.barrel'.split(
    ' ',
  ),
);

function needOf(number: string): number {
  let need = 0;
  for (const [model, count] of Object.entries(unitsToBuild)) {
    for (const { lines } of demoBoms[model] ?? []) {
      const perUnit = lines
        .filter((line) => line.partNumber === number && applies(line.condition))
        .reduce((sum, line) => sum + line.quantity * (1 + (line.scrapPercent ?? 0) / 100), 0);
      need += (perUnit * count) / (demoBoms[model]?.length ?? 1);
    }
  }
  return need;
}

function applies(condition: string | null | undefined): boolean {
  if (condition === null || condition === undefined) return true;
  const parsed = parseCondition(condition);
  return parsed.ok && (evaluateCondition(parsed.ast, usual) || condition.startsWith('not '));
}

/** On which day a part comes, and which share of the need. */
const receipts = {
  batch: [
    { day: -208, share: 0.6 },
    { day: -78, share: 0.65 },
  ],
  each: [
    { day: -208, share: 0.3 },
    { day: -168, share: 0.3 },
    { day: -88, share: 0.4 },
    { day: -34, share: 0.3 },
  ],
} as const;

/** What the stores do not have enough of when the last batch is to be kitted. */
const scarce = new Set(['ENC-ROT-24', 'DISP-OLED-128X32', 'CASE-H3']);

/** All that came into the stores, with what was found wrong with it. */
export function stockScenes(calendar: Calendar, cast: Cast, random: Random): Scene[] {
  const scenes: Scene[] = [];
  for (const part of demoParts) {
    const need = needOf(part.number);
    if (need === 0) continue;
    for (const [index, { day, share }] of receipts[part.trace].entries()) {
      const isLast = index === receipts[part.trace].length - 1;
      const quantity = rounded(part, need * (isLast && scarce.has(part.number) ? share * 0.6 : share));
      scenes.push(receipt(part, quantity, calendar.at(day, random.between(9, 15)), cast, random));
    }
  }
  return [...scenes, ...troubles(calendar, cast)];
}

function rounded({ pack }: DemoPart, quantity: number): number {
  return Math.ceil(quantity / pack) * pack;
}

function receipt(part: DemoPart, quantity: number, at: Date, cast: Cast, random: Random): Scene {
  const made = new Date(at.getTime() - random.whole(40, 400) * 24 * 3600_000);
  const week = 1 + Math.floor((made.getTime() - Date.UTC(made.getUTCFullYear(), 0, 1)) / (7 * 24 * 3600_000));
  const dateCode = `${String(made.getUTCFullYear() % 100).padStart(2, '0')}${String(week).padStart(2, '0')}`;
  const costMinor = Math.round((part.priceCents100 * quantity * random.between(0.94, 1.08)) / 100);
  return {
    at,
    actor: cast.builder,
    play: (w) =>
      receiveLot(
        {
          ...{ part: part.number, quantity, bin: part.bin, dateCode, costMinor },
          supplier: demoSuppliers[part.supplier].name,
          state: 'usable',
        },
        w,
      ),
  };
}

/** A lot that was barred after some of it had been built in, one that waits for inspection, and a count. */
function troubles(calendar: Calendar, cast: Cast): Scene[] {
  const received = new Map<string, string>();
  const receive = (
    key: string,
    part: string,
    quantity: number,
    state: 'usable' | 'waiting',
    day: number,
  ): Scene => ({
    at: calendar.at(day, 10.2),
    actor: cast.builder,
    play: async (w) => {
      const found = demoParts.find(({ number }) => number === part);
      const supplier = demoSuppliers[found?.supplier ?? 0].name;
      const { number } = await receiveLot(
        { part, quantity, supplier, state, ...(found && { bin: found.bin }) },
        w,
      );
      received.set(key, number);
    },
  });
  const lot = (key: string) => received.get(key) ?? '';
  return [
    receive('bad', 'FET-N-RF-TO220', 18, 'usable', -214),
    {
      at: calendar.at(-139, 16.4),
      actor: cast.owner,
      play: (w) =>
        setLotState(
          {
            lot: lot('bad'),
            state: 'barred',
            reason:
              'Two of this lot leaked at the gate after the soak; not to be used until the supplier answers.',
          },
          w,
        ),
    },
    receive('inspect', 'XTAL-4M9152-HC49U', 100, 'waiting', -2),
    receive('fresh', 'LABEL-SERIAL', 500, 'usable', -9),
    {
      at: calendar.at(-8, 17.1),
      actor: cast.builder,
      play: (w) => countLot({ lot: lot('fresh'), counted: 497, reason: 'Three spoilt in the printer.' }, w),
    },
  ];
}
