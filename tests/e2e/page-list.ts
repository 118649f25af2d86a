import { and, asc, desc, eq, gt, isNotNull, isNull, sql } from 'drizzle-orm';
import type { StaffRole } from '~/domain/people/roles';
import { invariant } from '~/lib/invariant';
import { paths } from '~/lib/paths';
import { linkToken } from '~/server/auth/tokens';
import type { Db } from '~/server/db/client';
import {
  batches,
  certificates,
  contacts,
  instruments,
  lots,
  models,
  optionGroups,
  options,
  orderLines,
  orders,
  parts,
  pathParts,
  paths as signalPaths,
  reworks,
  shipments,
  signInLinks,
  testRuns,
  units,
} from '~/server/db/schema';
import { pageRules } from '~/server/doors';
import { passes } from '~/server/rules';
import type { Viewer } from './people';

/** A page of the application at an address of the demo works. */
export interface ExamplePage {
  /** Names its pictures. */
  name: string;
  path: string;
  viewers: readonly Viewer[];
  /** The narrow width at which it has to work too, px. */
  narrow: 390 | 800 | 1024;
  /** How it answers. */
  status: 200 | 403 | 404 | 500;
}

const staffRoles = ['owner', 'builder', 'tester', 'shipper', 'bookkeeper'] as const satisfies StaffRole[];

/** Who may see a page; where anyone may, a visitor stands for all. */
function viewersOf(pattern: string): Viewer[] {
  const rule = pageRules[pattern];
  invariant(rule !== undefined, `${pattern} has a rule`);
  if (rule.kind === 'anyone') return ['visitor'];
  if (rule.kind === 'signed_in') return ['buyer'];
  return staffRoles.filter((role) => passes(rule, { roles: [role] }) === 'yes');
}

/** The floor, the stores and the bench also work on a tablet held in one hand; the shop from a telephone on. */
function narrowOf(pattern: string): ExamplePage['narrow'] {
  if (!pattern.startsWith('/works')) return 390;
  const onTablet = /^\/works\/(parts|lots|floor|bench|instruments|paths|path-parts|checks|units)(\/|$)/;
  return onTablet.test(pattern) ? 800 : 1024;
}

/** Addresses by route pattern, taken from what the demo works holds. */
async function addressesOf(db: Db, secret: string): Promise<Record<string, Record<string, string>>> {
  const openBatch = await one(
    db
      .select({ number: batches.number, modelId: batches.modelId })
      .from(batches)
      .where(
        and(
          eq(batches.state, 'open'),
          gt(sql`${batches.places} - ${batches.placesTaken} - ${batches.placesHeld}`, 0),
        ),
      )
      .orderBy(desc(batches.number)),
    'an open batch with a place',
  );
  const model = await one(db.select().from(models).where(eq(models.id, openBatch.modelId)), 'its model');
  const chosen = await db
    .select({ key: options.key })
    .from(options)
    .innerJoin(optionGroups, eq(optionGroups.id, options.optionGroupId))
    .where(and(eq(optionGroups.modelId, model.id), eq(options.isDefault, true)));
  const paidOrder = await one(
    db
      .select({ number: orders.number, id: orders.id })
      .from(orders)
      .where(eq(orders.state, 'paid'))
      .orderBy(asc(orders.number)),
    'a paid order',
  );
  const unpaid = await one(
    db
      .select({ id: orders.id, number: orders.number })
      .from(orders)
      .where(eq(orders.state, 'awaiting_payment'))
      .orderBy(desc(orders.number)),
    'an unpaid order',
  );
  const own = await one(
    db
      .select({ number: orders.number })
      .from(orders)
      .innerJoin(contacts, eq(contacts.id, orders.contactId))
      .where(and(isNotNull(orders.buyerUserId), eq(contacts.callSign, 'Q0ABC')))
      .orderBy(asc(orders.number)),
    'an order of the buyer who can sign in',
  );
  const certificate = await one(
    db.select().from(certificates).where(isNotNull(certificates.fileId)).orderBy(desc(certificates.id)),
    'a printed certificate',
  );
  const lot = await one(
    db
      .select({ number: lots.number, part: parts.number })
      .from(lots)
      .innerJoin(parts, eq(parts.id, lots.partId))
      .where(eq(parts.trace, 'each'))
      .orderBy(asc(lots.id)),
    'a lot',
  );
  const atStage = (stage: (typeof units.$inferSelect)['stage']) =>
    one(
      db.select({ serial: units.serial }).from(units).where(eq(units.stage, stage)).orderBy(desc(units.id)),
      `a unit at ${stage}`,
    );
  const run = (state: 'open' | 'closed') =>
    one(
      db
        .select({ serial: units.serial, runNo: testRuns.runNo })
        .from(testRuns)
        .innerJoin(units, eq(units.id, testRuns.unitId))
        .where(eq(testRuns.state, state))
        .orderBy(desc(testRuns.id)),
      `a run that is ${state}`,
    );
  const packable = await one(
    db
      .select({ number: orders.number })
      .from(units)
      .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
      .innerJoin(orders, eq(orders.id, orderLines.orderId))
      .where(eq(units.stage, 'pack'))
      .orderBy(asc(units.id)),
    'an order to pack',
  );
  const shipment = (state: 'packed' | 'shipped') =>
    one(
      db
        .select({ number: shipments.number })
        .from(shipments)
        .where(eq(shipments.state, state))
        .orderBy(desc(shipments.id)),
      `a shipment that is ${state}`,
    );
  const [kit, boards, tested, gone] = [
    await atStage('kit'),
    await atStage('boards'),
    await atStage('pack'),
    await atStage('gone'),
  ];
  const [open, closed] = [await run('open'), await run('closed')];
  const retested = await one(
    db
      .select({ serial: units.serial })
      .from(testRuns)
      .innerJoin(units, eq(units.id, testRuns.unitId))
      .where(and(eq(testRuns.runNo, 2), eq(testRuns.result, 'passed')))
      .orderBy(desc(testRuns.id)),
    'a unit that was tested twice',
  );
  const failed = await one(
    db
      .select({ serial: units.serial, runNo: testRuns.runNo })
      .from(reworks)
      .innerJoin(testRuns, eq(testRuns.id, reworks.testRunId))
      .innerJoin(units, eq(units.id, testRuns.unitId))
      .where(isNull(reworks.closedAt))
      .orderBy(desc(testRuns.id)),
    'a unit in rework after a failed run',
  );
  const instrument = await one(
    db.select({ number: instruments.number }).from(instruments).orderBy(asc(instruments.id)),
    'an instrument',
  );
  const pathPart = await one(
    db.select({ number: pathParts.number }).from(pathParts).orderBy(asc(pathParts.id)),
    'a path part',
  );
  const signalPath = await one(
    db.select({ number: signalPaths.number }).from(signalPaths).orderBy(desc(signalPaths.id)),
    'a path',
  );
  const [signInLink] = await db
    .select({ id: signInLinks.id })
    .from(signInLinks)
    .orderBy(desc(signInLinks.id))
    .limit(1);
  const token = linkToken(secret, 'order', paidOrder.id);
  return {
    '/404': { '': '/nothing/is/here' },
    '/500': { '': '/500' },
    '/closed': { '': '/closed' },
    '/': { '': paths.shop() },
    '/rigs/[slug]': { '': paths.rig(model.slug) },
    '/checkout': {
      '': paths.checkout({ batch: String(openBatch.number), option: chosen.map(({ key }) => key) }),
      'nothing-chosen': paths.checkout(),
    },
    '/orders/[token]': {
      '': paths.orderByLink(token),
      unpaid: paths.orderByLink(linkToken(secret, 'order', unpaid.id)),
    },
    '/orders/[token]/pay': { '': paths.payByLink(token) },
    '/my/orders': { '': paths.myOrders() },
    '/my/orders/[number]': { '': paths.myOrder(own.number) },
    '/certificates': { '': paths.certificateCheck() },
    '/certificates/[code]': { '': paths.certificateByCode(certificate.code) },
    '/certificates/keys': { '': paths.certificateKeys() },
    '/sign-in': { '': paths.signIn() },
    '/sign-in/[token]': { '': paths.signInLink(linkToken(secret, 'sign_in', signInLink?.id ?? 0)) },
    '/works': { '': paths.works() },
    '/works/scan': { '': paths.scan(lot.number.slice(0, 3)) },
    '/works/orders': { '': paths.counter() },
    '/works/orders/[number]': {
      '': paths.worksOrder(paidOrder.number),
      unpaid: paths.worksOrder(unpaid.number),
    },
    '/works/batches': { '': paths.plan() },
    '/works/batches/[number]': { '': paths.batch(openBatch.number) },
    '/works/models': { '': paths.worksModels() },
    '/works/models/new': { '': paths.newModel() },
    '/works/models/[slug]': { '': paths.worksModel(model.slug) },
    '/works/history': { '': paths.history() },
    '/works/quantities': { '': paths.quantities() },
    '/works/limit-rules': { '': `${paths.limitRules()}?power=5&tx=7030&product=14060` },
    '/works/models/[slug]/test-plans/[letter]': { '': paths.testPlan(model.slug, 'A') },
    '/works/models/[slug]/bom-import': { '': paths.bomImport(model.slug) },
    '/works/models/[slug]/frequency-plan': { '': paths.frequencyPlan(model.slug) },
    '/works/parts': { '': paths.stores() },
    '/works/parts/[number]': { '': paths.part(lot.part) },
    '/works/lots/receive': { '': paths.receive(lot.part) },
    '/works/lots/[number]': { '': paths.lot(lot.number) },
    '/works/floor': { '': paths.floor() },
    '/works/units/[serial]': {
      'at-kit': paths.unit(kit.serial),
      'at-pack': paths.unit(tested.serial),
      'in-rework': paths.unit(failed.serial),
      gone: paths.unit(gone.serial),
    },
    '/works/units/[serial]/kit': { '': paths.unitKit(kit.serial) },
    '/works/units/[serial]/build': { '': paths.unitBuild(boards.serial) },
    '/works/units/[serial]/runs/compare': {
      '': paths.compareRuns(retested.serial),
      single: paths.compareRuns(open.serial),
    },
    '/works/units/[serial]/runs/[run]': {
      failed: paths.run(failed.serial, failed.runNo),
      open: paths.run(open.serial, open.runNo),
      closed: paths.run(closed.serial, closed.runNo),
    },
    '/works/bench': { '': paths.bench() },
    '/works/bench/rig': { '': paths.testRig(model.slug) },
    '/works/bench/equipment': { '': paths.firstEquipment() },
    '/works/instruments': { '': paths.instruments() },
    '/works/instruments/[number]': { '': paths.instrument(instrument.number) },
    '/works/paths': { '': paths.signalPaths() },
    '/works/paths/[number]': { '': paths.signalPath(signalPath.number) },
    '/works/path-parts': { '': paths.pathParts() },
    '/works/path-parts/[number]': { '': paths.pathPart(pathPart.number) },
    '/works/checks': { '': paths.checks() },
    '/works/certificates/[number]': {
      '': paths.worksCertificate(`${certificate.number}${certificate.letter}`),
    },
    '/works/certificates/[number]/amend': {
      '': paths.amendCertificate(`${certificate.number}${certificate.letter}`),
    },
    '/works/dispatch': { '': paths.dispatch() },
    '/works/dispatch/[number]': { '': paths.packOrder(packable.number) },
    '/works/shipments/[number]': {
      packed: paths.shipment((await shipment('packed')).number),
      shipped: paths.shipment((await shipment('shipped')).number),
    },
    '/works/tokens': { '': paths.tokens() },
    '/works/people': { '': paths.office() },
    '/works/office': { '': paths.worksData() },
    '/works/keys': { '': paths.signingKeys() },
    '/works/changes': { '': paths.changes() },
  };
}

async function one<T>(query: { limit: (n: number) => PromiseLike<T[]> }, what: string): Promise<T> {
  const [row] = await query.limit(1);
  if (row === undefined) throw new Error(`The demo works has not ${what}.`);
  return row;
}

const statuses: Partial<Record<string, ExamplePage['status']>> = { '/404': 404, '/500': 500, '/closed': 403 };

/**
 * Every page that `doors.ts` lists, with an address of the demo works.
 *
 * @param secret the setting `RIGWRIGHT_SECRET`, from which the tokens of links follow
 * @throws Error where a page has no example here, or the demo works does not hold what one needs
 */
export async function listExamplePages(db: Db, secret: string): Promise<ExamplePage[]> {
  const addresses = await addressesOf(db, secret);
  return Object.keys(pageRules).flatMap((pattern) => {
    const examples = addresses[pattern];
    if (examples === undefined) throw new Error(`Give ${pattern} an example in tests/e2e/page-list.ts.`);
    const base = pattern === '/' ? 'shop' : pattern.slice(1).replaceAll(/[[\]]/g, '').replaceAll('/', '-');
    return Object.entries(examples).map(([variant, path]) => ({
      name: variant === '' ? base : `${base}-${variant}`,
      path,
      viewers: viewersOf(pattern),
      narrow: narrowOf(pattern),
      status: statuses[pattern] ?? 200,
    }));
  });
}
