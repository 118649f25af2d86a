import { createHash } from 'node:crypto';
import { asc, eq } from 'drizzle-orm';
import type { OrderPlacing } from '~/schemas/order-placing';
import type { Db } from '~/server/db/client';
import {
  certificates,
  fileChunks,
  files,
  orderLines,
  orders,
  signingKeys,
  testRuns,
  units,
} from '~/server/db/schema';
import type { CallContext } from '~/server/write';
import { callAs } from './bench';
import { seedPerson } from './people';
import { at, seedBatch, seedModel, seedWorks } from './catalog';
import { seedPaidOrder } from './orders';

/** When packing and shipping happens in the tests. */
export const packingAt = new Date('2027-03-20T10:00:00.000Z');

export interface DispatchOrderSeed {
  orderId: number;
  number: number;
  contactId: number;
  destination: string;
  units: { id: number; serial: string }[];
}

export interface DispatchSeed {
  owner: CallContext;
  shipper: CallContext;
  tester: number;
  batch: { batchId: number; number: number };
  testPlanRevisionId: number;
  signingKeyId: number;
}

/** A works with its people, a model, and batch 13, so that orders can be brought to dispatch. */
export async function seedDispatch(db: Db): Promise<DispatchSeed> {
  await seedWorks(db);
  const model = await seedModel(db);
  const batch = await seedBatch(db, model);
  const [owner, tester, shipper] = [
    await seedPerson(db, { name: 'Mara Quill', roles: ['owner'] }),
    await seedPerson(db, { name: 'Ines Aldous', roles: ['tester'] }),
    await seedPerson(db, { name: 'Tam Ruddock', roles: ['shipper'] }),
  ];
  const [{ insertId: signingKeyId }] = await db
    .insert(signingKeys)
    .values({ keyId: 'key-of-the-tests', publicKey: 'none', sealedPrivateKey: 'none', createdAt: at });
  return {
    owner: callAs(db, owner, packingAt),
    shipper: callAs(db, shipper, packingAt),
    tester,
    batch,
    testPlanRevisionId: model.testPlanRevisionId,
    signingKeyId,
  };
}

/** A paid order whose units have passed, are certified for its buyer, and wait to be packed. */
export async function seedReadyOrder(
  db: Db,
  seed: DispatchSeed,
  changes: Partial<OrderPlacing> = {},
): Promise<DispatchOrderSeed> {
  const { orderId, number } = await seedPaidOrder(db, { batch: seed.batch.number, ...changes });
  const [order] = await db.select().from(orders).where(eq(orders.id, orderId));
  if (order === undefined) throw new Error('The order is gone.');
  const spawned = await db
    .select({ id: units.id, serial: units.serial })
    .from(units)
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .where(eq(orderLines.orderId, orderId))
    .orderBy(asc(units.id));
  const ready = {
    orderId,
    number,
    contactId: order.contactId,
    destination: order.destinationCountry,
    units: spawned,
  };
  for (const unit of spawned) {
    const testRunId = await seedRun(db, seed, unit.id, { result: 'passed' });
    await seedCertificate(db, seed, ready, unit, { testRunId });
    await db.update(units).set({ stage: 'pack' }).where(eq(units.id, unit.id));
  }
  return ready;
}

/** The next run of a unit; closed, unless its state says otherwise. */
export async function seedRun(
  db: Db,
  seed: DispatchSeed,
  unitId: number,
  changes: Partial<typeof testRuns.$inferInsert>,
): Promise<number> {
  const earlier = await db.select({ id: testRuns.id }).from(testRuns).where(eq(testRuns.unitId, unitId));
  const [{ insertId }] = await db.insert(testRuns).values({
    unitId,
    runNo: earlier.length + 1,
    testPlanRevisionId: seed.testPlanRevisionId,
    state: 'closed',
    testerUserId: seed.tester,
    destinationCountry: 'DE',
    alignment: {},
    computationVersion: '1',
    openedAt: at,
    closedAt: at,
    ...changes,
  });
  return insertId;
}

/** A certificate of a unit for an order's buyer and destination, with its PDF, unless changed. */
export async function seedCertificate(
  db: Db,
  seed: DispatchSeed,
  order: Pick<DispatchOrderSeed, 'contactId' | 'destination'>,
  unit: { id: number; serial: string },
  changes: Partial<typeof certificates.$inferInsert> & { testRunId: number },
): Promise<number> {
  const earlier = await db.select({ id: certificates.id }).from(certificates);
  const no = earlier.length + 1;
  const fileId = 'fileId' in changes ? changes.fileId : await seedPdf(db, `${unit.serial} ${no}`);
  const [{ insertId }] = await db.insert(certificates).values({
    number: `TC-2027-${String(no).padStart(5, '0')}`,
    unitId: unit.id,
    contactId: order.contactId,
    destinationCountry: order.destination,
    code: `CODE${String(no).padStart(8, '0')}`,
    statement: '{}',
    signature: 'none',
    signingKeyId: seed.signingKeyId,
    issuedAt: at,
    issuedBy: seed.tester,
    ...changes,
    fileId,
  });
  return insertId;
}

async function seedPdf(db: Db, text: string): Promise<number> {
  const bytes = Buffer.from(`%PDF-1.7 ${text}`);
  const [{ insertId: fileId }] = await db.insert(files).values({
    sha256: createHash('sha256').update(bytes).digest('hex'),
    sizeBytes: bytes.byteLength,
    mediaType: 'application/pdf',
    name: 'certificate.pdf',
    createdAt: at,
  });
  await db.insert(fileChunks).values({ fileId, position: 0, bytes });
  return fileId;
}
