import { eq } from 'drizzle-orm';
import { invariant } from '~/lib/invariant';
import { batches } from '~/server/db/schema';
import { askForBalance } from '~/server/services/orders/ask-for-balance';
import { changeBatch } from '~/server/services/planning/change-batch';
import { openBatch } from '~/server/services/planning/open-batch';
import { issueToBatch } from '~/server/services/production/issue-to-batch';
import { placeHold } from '~/server/services/production/place-hold';
import type { BatchStory, PlannedOrder } from './batches';
import { drawOptions } from './batches';
import { runScene } from './bench';
import type { DemoBuyer } from './buyers';
import type { Calendar } from './calendar';
import { certificateScene, parcelScene } from './dispatch';
import type { Fate } from './fates';
import { buildScenes, remedyScene } from './floor';
import type { DemoOrder, DemoUnit, Ordering } from './orders';
import { balanceScene, orderScenes } from './orders';
import type { Cast } from './people';
import type { Scene } from './play';
import type { Random } from './random';
import { seededRandom } from './random';
import { drawTraits } from './readings';

/** What the stories are drawn with. */
export interface Studio {
  calendar: Calendar;
  cast: Cast;
  random: Random;
  nextBuyer: (over?: Partial<DemoBuyer>) => DemoBuyer;
}

/** A batch's number, once it is opened. */
export interface DemoBatch {
  number: number;
}

const dayMs = 24 * 3600_000;
const minuteMs = 60_000;

/** All scenes of one batch. */
export function batchScenes(story: BatchStory, studio: Studio): { batch: DemoBatch; scenes: Scene[] } {
  const { calendar, cast, random } = studio;
  const batch: DemoBatch = { number: 0 };
  const scenes: Scene[] = [
    {
      at: calendar.at(story.openedOn, 9.5),
      actor: cast.owner,
      play: async (w) => {
        const { slug: modelSlug, places, priceMinor, depositMinor } = story;
        const estimatedOn = calendar.day(story.estimatedOn);
        const opened = await openBatch(
          { modelSlug, places, priceMinor, depositMinor, currency: 'EUR', estimatedOn },
          w,
        );
        batch.number = opened.number;
      },
    },
  ];
  if (story.issuedOn !== null) {
    const at = calendar.at(story.issuedOn, 8.75);
    scenes.push(stateScene(batch, 'building', at, cast), {
      at: new Date(at.getTime() + 40 * minuteMs),
      actor: cast.builder,
      play: (w) => issueToBatch({ batchNumber: batch.number }, w),
    });
  }
  if (story.closedOn !== null)
    scenes.push(stateScene(batch, 'closed', calendar.at(story.closedOn, 18), cast));

  let index = 0;
  const [firstDay, lastDay] = story.ordered;
  for (const [place, planned] of story.orders.entries()) {
    const day = firstDay + ((lastDay - firstDay) * (place + random.between(0.1, 0.8))) / story.orders.length;
    const at = calendar.at(Math.floor(day), random.between(7, 21));
    const fatesHere = story.fates.slice(index, index + planned.quantity);
    const { order, scenes: paid, option } = ordered(planned, fatesHere, story, batch, at, studio);
    scenes.push(...paid);
    const fates = order.units.map((unit, nth) => ({
      unit,
      fate: story.fates[index + nth],
      nth: index + nth,
    }));
    index += order.units.length;
    let readyAt = at;
    for (const { unit, fate, nth } of fates) {
      invariant(fate !== undefined, 'every unit of the demo has its fate');
      const life = unitScenes(unit, fate, { story, option, nth }, studio);
      scenes.push(...life.scenes);
      if (life.readyAt > readyAt) readyAt = life.readyAt;
    }
    scenes.push(...closingScenes(order, planned, fates[0]?.fate?.end ?? 'none', readyAt, story, studio));
  }
  return { batch, scenes };
}

function stateScene(batch: DemoBatch, state: 'building' | 'closed', at: Date, cast: Cast): Scene {
  return {
    at,
    actor: cast.owner,
    play: async (w) => {
      const [row] = await w.tx.select().from(batches).where(eq(batches.number, batch.number));
      invariant(row !== undefined, `batch ${batch.number} is there`);
      await changeBatch({ ...row, state }, w);
    },
  };
}

function ordered(
  { quantity, pay, buyer: over, isOwn }: PlannedOrder,
  fates: readonly Fate[],
  { slug }: BatchStory,
  batch: DemoBatch,
  at: Date,
  { cast, random, nextBuyer }: Studio,
): { order: DemoOrder; scenes: Scene[]; option: string[] } {
  const buyer = nextBuyer(over);
  // A fault is found on a band that the unit has, and Austria's limit on the third harmonic of 15 m is beyond
  // what this rig is made for.
  const isLow = buyer.country === 'AT' || fates.some(({ runs }) => runs.some(({ fault }) => fault !== null));
  const option = drawOptions(slug, isLow, random);
  const by: Ordering['by'] =
    isOwn === true || random.chance(0.8) ? 'card' : random.pick(['transfer', 'cash'] as const);
  const ordering = {
    ...{ at, buyer, option, quantity, pay, by },
    batchNumber: () => batch.number,
    ...(isOwn === true ? { actor: cast.buyer } : {}),
  };
  return { ...orderScenes(ordering, cast), option };
}

interface Making {
  story: BatchStory;
  option: string[];
  /** Which of the batch it is. */
  nth: number;
}

/** The way of one unit through floor and bench, and when it was ready to be packed. */
function unitScenes(
  unit: DemoUnit,
  fate: Fate,
  { story, option, nth }: Making,
  { calendar, cast, random: shared }: Studio,
): { scenes: Scene[]; readyAt: Date } {
  // Some of it is drawn as the scenes are played: units must not change one another by the hour of the day.
  const random = seededRandom(shared.whole(1, 2 ** 31));
  const [firstKit, daysBetween] = story.kits;
  const kitDay = Math.floor(firstKit + nth * daysBetween);
  const traits = drawTraits(story.slug, story.shift, story.firmware, random);
  const scenes: Scene[] = [];
  if (fate.builtTo !== 'waiting') {
    const from = calendar.at(kitDay, random.between(8, 9.5));
    scenes.push(...buildScenes(unit, { slug: story.slug, option }, fate.builtTo, from, cast, random));
  }
  let at = calendar.at(kitDay + 3, 9.4 + (nth % 4) * 1.7);
  if (fate.openedMinutesAgo !== undefined) {
    at = new Date(calendar.now.getTime() - fate.openedMinutesAgo * minuteMs);
  }
  for (const [run, plan] of fate.runs.entries()) {
    scenes.push(runScene(unit, traits, plan, at, cast, random));
    const remedy = fate.remedies[run];
    if (remedy !== undefined) {
      scenes.push(remedyScene(unit, remedy, new Date(at.getTime() + 0.95 * dayMs), cast));
    }
    at = new Date(at.getTime() + dayMs + random.whole(5, 40) * minuteMs);
  }
  const readyAt = new Date(at.getTime() - dayMs + random.whole(85, 130) * minuteMs);
  if (fate.end !== 'none') scenes.push(certificateScene(unit, readyAt, fate.end !== 'certified', cast));
  if (fate.hold !== undefined) {
    const { hold: reason } = fate;
    scenes.push({
      at: calendar.at(kitDay + 4, 11),
      actor: cast.tester,
      play: (w) => placeHold({ subject: { type: 'unit', number: unit.serial }, reason }, w),
    });
  }
  return { scenes, readyAt };
}

/** The balance and the parcel of an order whose units are certified. */
function closingScenes(
  order: DemoOrder,
  planned: PlannedOrder,
  end: Fate['end'],
  readyAt: Date,
  story: BatchStory,
  { cast, random }: Studio,
): Scene[] {
  const scenes: Scene[] = [];
  const owes = planned.pay === 'deposit' && story.depositMinor !== null;
  if (owes && end !== 'none' && (planned.paysBalance || planned.isAskedForBalance === true)) {
    scenes.push({
      at: new Date(readyAt.getTime() + 25 * minuteMs),
      actor: cast.owner,
      play: (w) => askForBalance({ orderNumber: order.number }, w),
    });
    if (planned.paysBalance) scenes.push(balanceScene(order, new Date(readyAt.getTime() + 190 * minuteMs)));
  }
  if (end === 'packed' || end === 'gone') {
    const packedAt = new Date(readyAt.getTime() + 0.95 * dayMs);
    const shippedAt = end === 'gone' ? new Date(packedAt.getTime() + random.whole(60, 200) * minuteMs) : null;
    const weightG = order.units.length * random.whole(700, 1300);
    scenes.push(parcelScene(order, { packedAt, shippedAt, weightG }, cast, random));
  }
  return scenes;
}
