import { and, desc, eq, isNull, notInArray, sql } from 'drizzle-orm';
import { db } from '~/server/db/client';
import type { Db } from '~/server/db/client';
import { outbox } from '~/server/db/schema';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import { cancelUnpaidOrder } from '~/server/services/orders/cancel-unpaid-order';
import { batchStories, drawOptions } from './batches';
import { buyerSource } from './buyers';
import type { Calendar } from './calendar';
import { calendarAround } from './calendar';
import { addCatalog, issueBom } from './catalog';
import { checkScenes } from './checks';
import { addEquipment } from './equipment';
import { endOldCheckouts, unpaidOrderScene } from './orders';
import type { Cast } from './people';
import { addPeople } from './people';
import type { Scene } from './play';
import { play } from './play';
import { seededRandom } from './random';
import { addSuppliers, stockScenes } from './stock';
import type { DemoBatch, Studio } from './story';
import { batchScenes } from './story';

export { demoSignIns } from './people';

const seed = 40_7030;
/** Letters that are still to be sent when the demo begins, so that its mailbox is not empty. */
const lettersLeft = 6;

/**
 * Fills an empty database with the demo works: catalog, people, stock and half a year of orders, building,
 * testing and dispatch, all through the services. The same at every run but for ids, codes and tokens; dates
 * lie around the present.
 */
export async function seedDemo(): Promise<void> {
  const database = db();
  const calendar = calendarAround(new Date());
  const founded = calendar.at(-240, 9);
  const cast = await database.transaction(async (tx) => {
    await addSuppliers(tx);
    return addPeople(tx, founded);
  });
  await play(database, [
    { at: founded, actor: cast.owner, play: addSigningKey },
    { at: founded, actor: cast.owner, play: (w) => addEquipment(w, calendar) },
    { at: founded, actor: cast.owner, play: addCatalog },
    ...history(calendar, cast),
    { at: calendar.now, actor: { kind: 'system' }, play: endOldCheckouts },
  ]);
  await settleLetters(database);
}

function history(calendar: Calendar, cast: Cast): Scene[] {
  const random = seededRandom(seed);
  const studio: Studio = { calendar, cast, random, nextBuyer: buyerSource(random) };
  const made = batchStories.map((story) => ({ story, ...batchScenes(story, studio) }));
  const newest = made.at(-1);
  return [
    ...stockScenes(calendar, cast, random),
    ...made.flatMap(({ scenes }) => scenes),
    ...checkScenes(calendar, cast, seededRandom(seed)),
    { at: calendar.at(-100, 14.5), actor: cast.owner, play: (w) => issueBom(w, 'holm-3', 1) },
    ...(newest === undefined ? [] : unpaid(newest.batch, newest.story.slug, studio)),
  ];
}

/** An order that was given up, and one whose buyer is at the payment page now. */
function unpaid(batch: DemoBatch, slug: string, { calendar, cast, random, nextBuyer }: Studio): Scene[] {
  const place = (at: Date) =>
    unpaidOrderScene({
      ...{ at, batchNumber: () => batch.number, quantity: 1, pay: 'full', by: 'card' },
      buyer: nextBuyer(),
      option: drawOptions(slug, false, random),
    });
  const givenUp = place(calendar.at(-4, 20));
  const paying = place(new Date(calendar.now.getTime() - 2 * 60_000));
  return [
    givenUp.scene,
    {
      at: calendar.at(-3, 9.1),
      actor: cast.owner,
      play: (w) =>
        cancelUnpaidOrder(
          { orderId: givenUp.order.id, reason: 'The buyer wrote that they think it over.' },
          w,
        ),
    },
    paying.scene,
  ];
}

/** The letters of the past are taken as sent, but for the newest. */
async function settleLetters(database: Db): Promise<void> {
  const open = and(eq(outbox.kind, 'mail'), isNull(outbox.doneAt));
  const newest = await database
    .select({ id: outbox.id })
    .from(outbox)
    .where(open)
    .orderBy(desc(outbox.createdAt), desc(outbox.id))
    .limit(lettersLeft);
  const kept = newest.map(({ id }) => id);
  await database
    .update(outbox)
    .set({ doneAt: sql`${outbox.createdAt}`, attempts: 1 })
    .where(kept.length === 0 ? open : and(open, notInArray(outbox.id, kept)));
}
