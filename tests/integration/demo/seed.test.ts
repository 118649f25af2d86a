import { and, eq, isNotNull, isNull, ne, sql } from 'drizzle-orm';
import { expect, test } from 'vitest';
import { parseCode } from '../../../src/domain/certificates/code';
import type { Db } from '../../../src/server/db/client';
import {
  batches,
  bomLines,
  bomRevisions,
  certificateBuyers,
  certificates,
  contacts,
  holds,
  ledgerEntries,
  lots,
  models,
  orderLines,
  orders,
  outbox,
  payments,
  placeHolds,
  reworks,
  signingKeys,
  storeEntries,
  suppliers,
  testRuns,
  units,
  userProfiles,
  works,
} from '../../../src/server/db/schema';
import { digestBuyer, verifyText } from '../../../src/server/keys/ed25519';
import { demoSignIns, seedDemo } from '../../../src/server/run/demo/seed';
import { findSignIn } from '../../../src/server/queries/people/find-sign-in';
import { passwordFits } from '../../../src/server/auth/passwords';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

// One seeding serves all: every other test begins with empty tables.
test('the demo works is whole, invented, and keeps every rule', { timeout: 300_000 }, async () => {
  const before = Date.now();
  await seedDemo();
  const { db } = database;
  await expectSize(db);
  await expectInvented(db);
  await expectStockAddsUp(db);
  await expectPlacesAndUnits(db);
  await expectCertificatesHold(db);
  await expectSomethingToLookAt(db);
  await expectPast(db, before);
  for (const { email, password } of demoSignIns) {
    const person = await findSignIn(db, email);
    expect(await passwordFits(person?.passwordHash ?? null, password), `${email} can sign in`).toBe(true);
  }
});

async function expectSize(db: Db): Promise<void> {
  const forSale = await db.select({ slug: models.slug }).from(models).where(eq(models.state, 'for_sale'));
  expect(forSale.map(({ slug }) => slug).sort()).toEqual(['holm-3', 'skerry-5', 'voe-40']);
  const lines = await db
    .select({ n: sql<number>`count(*)`.mapWith(Number), model: models.slug })
    .from(bomLines)
    .innerJoin(bomRevisions, eq(bomRevisions.id, bomLines.bomRevisionId))
    .innerJoin(models, eq(models.id, bomRevisions.modelId))
    .groupBy(bomRevisions.id, models.slug);
  for (const { n, model } of lines) {
    expect.soft(n, `lines of a BOM of ${model}`).toBeGreaterThanOrEqual(60);
    expect.soft(n, `lines of a BOM of ${model}`).toBeLessThanOrEqual(150);
  }
  expect.soft(await db.$count(suppliers)).toBe(3);
  expect.soft(await db.$count(batches)).toBe(4);
  expect.soft(await db.$count(units)).toBe(60);
  const closed = await db.$count(testRuns, eq(testRuns.state, 'closed'));
  expect.soft(closed).toBeGreaterThanOrEqual(38);
  expect.soft(closed).toBeLessThanOrEqual(45);
  const results = await db.selectDistinct({ result: testRuns.result }).from(testRuns);
  expect
    .soft(results.map(({ result }) => result ?? 'open').sort())
    .toEqual(['failed', 'open', 'passed', 'undecided']);
}

async function expectInvented(db: Db): Promise<void> {
  const profiles = await db.select().from(userProfiles);
  const addressees = await db.select().from(contacts);
  const makers = await db.select().from(suppliers);
  const [own] = await db.select().from(works);
  const emails = [...profiles, ...addressees, ...makers].flatMap(({ email }) => email ?? []);
  for (const email of [...emails, own?.email ?? '']) expect.soft(email).toMatch(/\.(test|example)$/);
  const callSigns = [...profiles, ...addressees, ...(await db.select().from(certificateBuyers))];
  for (const { callSign } of callSigns) if (callSign !== null) expect.soft(callSign).toMatch(/^Q\d[A-Z]+$/);
}

async function expectStockAddsUp(db: Db): Promise<void> {
  const rows = await db
    .select({
      number: lots.number,
      onHand: lots.onHand,
      sum: sql<number>`coalesce(sum(${storeEntries.quantity}), 0)`.mapWith(Number),
    })
    .from(lots)
    .leftJoin(storeEntries, eq(storeEntries.lotId, lots.id))
    .groupBy(lots.id, lots.number, lots.onHand);
  expect(rows.length).toBeGreaterThan(200);
  for (const { number, onHand, sum } of rows) expect.soft(onHand, `on hand of ${number}`).toBe(sum);
}

async function expectPlacesAndUnits(db: Db): Promise<void> {
  const kept = await db.select().from(placeHolds);
  const placesIn = (batchId: number, state: 'held' | 'taken') =>
    kept
      .filter((hold) => hold.batchId === batchId && hold.state === state)
      .reduce((sum, { quantity }) => sum + quantity, 0);
  for (const { id, number, places, placesTaken, placesHeld } of await db.select().from(batches)) {
    expect.soft(placesTaken, `places taken in batch ${number}`).toBe(placesIn(id, 'taken'));
    expect.soft(placesHeld, `places held in batch ${number}`).toBe(placesIn(id, 'held'));
    expect.soft(placesTaken + placesHeld, `places of batch ${number}`).toBeLessThanOrEqual(places);
  }
  for (const line of await db
    .select({
      order: orders.number,
      state: orders.state,
      quantity: orderLines.quantity,
      spawned:
        sql<number>`(select count(*) from ${units} where ${units.orderLineId} = ${orderLines.id})`.mapWith(
          Number,
        ),
    })
    .from(orderLines)
    .innerJoin(orders, eq(orders.id, orderLines.orderId))) {
    const isPaid = line.state === 'paid' || line.state === 'fulfilled';
    expect.soft(line.spawned, `units of order ${line.order}`).toBe(isPaid ? line.quantity : 0);
  }
}

async function expectCertificatesHold(db: Db): Promise<void> {
  const issued = await db
    .select({
      certificate: certificates,
      publicKey: signingKeys.publicKey,
      buyer: certificateBuyers,
      run: testRuns,
    })
    .from(certificates)
    .innerJoin(signingKeys, eq(signingKeys.id, certificates.signingKeyId))
    .innerJoin(testRuns, eq(testRuns.id, certificates.testRunId))
    .leftJoin(certificateBuyers, eq(certificateBuyers.certificateId, certificates.id));
  expect(issued.length).toBeGreaterThan(25);
  for (const { certificate, publicKey, buyer, run } of issued) {
    const { number, statement, signature, code } = certificate;
    expect.soft(verifyText(publicKey, statement, signature), `signature of ${number}`).toBe(true);
    expect.soft(parseCode(code), `code of ${number}`).toMatchObject({ ok: true });
    expect.soft(run.result, `run of ${number}`).toBe('passed');
    const { buyerDigest } = JSON.parse(statement) as { buyerDigest: string };
    const part = buyer && { callSign: buyer.callSign, orderNumber: buyer.orderNumber, salt: buyer.salt };
    expect.soft(part && digestBuyer(part), `buyer of ${number}`).toBe(buyerDigest);
  }
  const unproved = await db
    .select({ serial: units.serial })
    .from(units)
    .leftJoin(certificates, eq(certificates.unitId, units.id))
    .where(and(eq(units.stage, 'gone'), isNull(certificates.fileId)));
  expect(unproved, 'units that left without their certificate').toEqual([]);
}

async function expectSomethingToLookAt(db: Db): Promise<void> {
  const today = new Date().toISOString().slice(0, 10);
  const late = await db.$count(
    batches,
    and(ne(batches.state, 'closed'), sql`${batches.estimatedOn} < ${today}`),
  );
  expect.soft(late, 'late batches').toBe(1);
  expect.soft(await db.$count(lots, eq(lots.state, 'barred')), 'barred lots').toBe(1);
  expect.soft(await db.$count(holds, isNull(holds.endedAt)), 'holds').toBeGreaterThan(0);
  expect.soft(await db.$count(contacts, sql`char_length(${contacts.name}) > 120`), 'long names').toBe(1);
  const found = await db
    .select({ cause: reworks.foundCause })
    .from(reworks)
    .where(isNotNull(reworks.confirmedByRunId));
  expect.soft(new Set(found.map(({ cause }) => cause)).size, 'causes found').toBeGreaterThanOrEqual(4);
  expect.soft(found.length, 'remedies that held').toBeGreaterThanOrEqual(8);
  const packable = await db
    .select({ total: orders.totalMinor, paid: sql<number>`sum(${payments.amountMinor})`.mapWith(Number) })
    .from(orders)
    .innerJoin(orderLines, eq(orderLines.orderId, orders.id))
    .innerJoin(units, and(eq(units.orderLineId, orderLines.id), eq(units.stage, 'pack')))
    .innerJoin(payments, eq(payments.orderId, orders.id))
    .groupBy(orders.id, orders.totalMinor, units.id);
  const owing = packable.filter(({ total, paid }) => paid < total);
  expect.soft(owing.length, 'units that wait for the balance').toBeGreaterThan(0);
  const open = await db.$count(outbox, and(eq(outbox.kind, 'mail'), isNull(outbox.doneAt)));
  expect.soft(open, 'letters still to be sent').toBeGreaterThan(0);
  expect.soft(open, 'letters still to be sent').toBeLessThan(15);
}

/** Nothing is dated after the seeding, and half a year lies behind. */
async function expectPast(db: Db, before: number): Promise<void> {
  const [span] = await db
    .select({ first: sql<string>`min(${ledgerEntries.at})`, last: sql<string>`max(${ledgerEntries.at})` })
    .from(ledgerEntries);
  const at = (text: string | undefined) => new Date(`${text?.replace(' ', 'T') ?? ''}Z`).getTime();
  expect.soft(at(span?.last)).toBeLessThanOrEqual(Date.now());
  expect.soft(before - at(span?.first)).toBeGreaterThan(180 * 24 * 3600_000);
}
