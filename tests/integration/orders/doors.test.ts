import { asc } from 'drizzle-orm';
import Stripe from 'stripe';
import { beforeEach, describe, expect, it } from 'vitest';
import { GET as getModels } from '~/pages/api/models';
import { POST as postOrder } from '~/pages/api/orders';
import { GET as getOrder } from '~/pages/api/orders/[number]';
import { POST as postCheckout } from '~/pages/api/orders/[number]/checkouts';
import { POST as postPayment } from '~/pages/api/orders/[number]/payments';
import { POST as postLinkCheckout } from '~/pages/api/orders/by-link/[token]/checkouts';
import { POST as postEvent } from '~/pages/api/provider-events';
import type { StaffRole } from '~/domain/people/roles';
import { linkToken, tokenHash } from '~/server/auth/tokens';
import {
  checkouts,
  contacts,
  formReturns,
  idempotencyKeys,
  orders,
  payments,
  providerEvents,
  units,
  userProfiles,
} from '~/server/db/schema';
import { env } from '~/server/env';
import { checkoutReference } from '~/server/services/orders/checkout-reference';
import { seedBatch, seedModel, seedWorks } from '../../factories/catalog';
import { someDay } from '../../factories/contexts';
import { buildOrder, seedPaidOrder } from '../../factories/orders';
import { callDoor, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

beforeEach(async () => {
  await seedWorks(database.db);
  await seedBatch(database.db, await seedModel(database.db));
});

function buildPerson(id: number, ...roles: StaffRole[]) {
  return { id, name: 'Quill', email: 'quill@works.test', callSign: null, roles };
}

const formOf = (fields: Record<string, string>, options: string[]) => {
  const form = new URLSearchParams(fields);
  for (const key of options) form.append('option', key);
  return {
    body: form.toString(),
    headers: {
      'content-type': 'application/x-www-form-urlencoded',
      accept: 'text/html',
      referer: 'http://localhost:4321/checkout?batch=13',
    },
  };
};

const formFields = {
  batch: '13',
  quantity: '1',
  pay: 'deposit',
  email: 'quirin@buyer.test',
  name: 'Quirin Quell',
  callSign: 'q0abc',
  phone: '',
  addressLines: '7 Heather Row\r\nBack door',
  city: 'Nowhere',
  region: '',
  postcode: '12345',
  country: 'DE',
};
const bands = ['band.40m', 'band.30m', 'band.20m'];

describe('placing an order', () => {
  it('answers a script with number and addresses; the token’s hash alone is kept', async () => {
    const { response: answer } = await callDoor(postOrder, {
      path: '/api/orders',
      ...sendJson(buildOrder()),
    });
    expect(answer.status).toBe(200);
    const body = (await answer.json()) as { number: number; payUrl: string; providerUrl: string | null };
    expect(body).toMatchObject({ number: 1, providerUrl: null });
    const token = new URL(body.payUrl).pathname.split('/')[2] ?? '';
    const [order] = await database.db.select().from(orders);
    expect(order?.linkHash).toBe(tokenHash(token));
    expect(JSON.stringify(await database.db.select().from(idempotencyKeys))).not.toContain(token);
  });

  it('sends a form on to the way to the payment page', async () => {
    const { response: answer } = await callDoor(postOrder, {
      path: '/api/orders',
      ...formOf(formFields, bands),
    });
    expect(answer.status).toBe(303);
    expect(answer.headers.get('location')).toMatch(/^\/orders\/[\w-]{43}\/pay$/);
    const [contact] = await database.db.select().from(contacts);
    expect(contact).toMatchObject({
      callSign: 'Q0ABC',
      addressLines: ['7 Heather Row', 'Back door'],
      phone: null,
    });
    const [order] = await database.db.select().from(orders);
    expect(order?.dueNowMinor).toBe(10_000);
  });

  it('sends a form back to its page with what was typed and what is wrong beside the fields', async () => {
    const fields = { ...formFields, email: 'nobody', callSign: '???', country: 'US', name: '<script>' };
    const { response: answer } = await callDoor(postOrder, { path: '/api/orders', ...formOf(fields, bands) });
    expect([answer.status, answer.headers.get('location')]).toEqual([303, '/checkout?batch=13']);
    const [kept] = await database.db.select().from(formReturns);
    expect(kept?.values).toMatchObject({ email: 'nobody', name: '<script>', option: bands });
    expect(Object.keys(kept?.fields ?? {}).sort()).toEqual(['callSign', 'email']);
  });

  it.each([
    [{ country: 'US' }, bands, { region: 'An address in this country needs the state or province.' }],
    [{ postcode: '' }, bands, { postcode: 'An address in this country needs the postcode.' }],
    [{}, ['band.40m'], { option: 'Bands: choose exactly three, not one.' }],
    [{ quantity: '21' }, bands, { quantity: 'Only 20 places are left in this batch.' }],
    [{ country: 'QQ' }, bands, { country: 'Choose the country.' }],
  ])('refuses %j with %j', async (changes, option, fields) => {
    const { response: answer } = await callDoor(postOrder, {
      path: '/api/orders',
      ...sendJson({ ...formFields, ...changes, option }),
    });
    const problem = (await answer.json()) as { fields: unknown };
    expect(problem.fields).toEqual(fields);
    expect(answer.headers.get('content-type')).toBe('application/problem+json');
    expect(await database.db.select().from(orders)).toHaveLength(0);
    expect(await database.db.select().from(contacts)).toHaveLength(0);
  });

  it('takes hostile text as text', async () => {
    const name = '\u202e\u0000<script>alert(1)</script> שלום'.padEnd(290, 'x');
    const { response: answer } = await callDoor(postOrder, {
      path: '/api/orders',
      ...sendJson(buildOrder({ name })),
    });
    expect(answer.status).toBe(200);
    const [contact] = await database.db.select().from(contacts);
    expect(contact?.name).toMatch(/^<script>alert\(1\)<\/script> שלוםx+$/);
    const { response: long } = await callDoor(postOrder, {
      path: '/api/orders',
      ...sendJson(buildOrder({ name: 'x'.repeat(301) })),
    });
    expect(long.status).toBe(400);
  });

  it('acts once under one Idempotency-Key, and gives the same answer', async () => {
    const call = { path: '/api/orders', ...sendJson(buildOrder(), { 'idempotency-key': 'key-1' }) };
    const answers = await Promise.all([callDoor(postOrder, call), callDoor(postOrder, call)]);
    const bodies = await Promise.all(answers.map(({ response }) => response.json()));
    expect(bodies[0]).toEqual(bodies[1]);
    expect(await database.db.select().from(orders)).toHaveLength(1);
    const { response: other } = await callDoor(postOrder, {
      path: '/api/orders',
      ...sendJson(buildOrder({ quantity: 2 }), { 'idempotency-key': 'key-1' }),
    });
    expect(other.status).toBe(409);
  });

  it('refuses a form from another site', async () => {
    const call = sendJson(buildOrder(), { origin: 'https://elsewhere.example' });
    const { response } = await callDoor(postOrder, { path: '/api/orders', ...call });
    expect(response.status).toBe(403);
  });
});

describe('the provider’s webhook', () => {
  function buildEvent(object: Record<string, unknown>, type = 'checkout.session.completed') {
    return JSON.stringify({
      id: 'evt_1',
      object: 'event',
      type,
      created: 1,
      livemode: false,
      data: { object },
    });
  }

  async function buildPaidEvent() {
    await callDoor(postOrder, { path: '/api/orders', ...sendJson(buildOrder()) });
    const [checkout] = await database.db.select().from(checkouts);
    if (checkout === undefined) throw new Error('There is no checkout.');
    return buildEvent({
      object: 'checkout.session',
      id: 'cs_1',
      payment_status: 'paid',
      payment_intent: 'pi_1',
      amount_total: 38_900,
      currency: 'eur',
      metadata: { checkout_id: checkoutReference(checkout), order_number: '1' },
    });
  }

  const sign = (payload: string, secret = 'whsec_integration') => {
    const timestamp = Math.floor(someDay.getTime() / 1000);
    return Stripe.webhooks.generateTestHeaderString({ payload, secret, timestamp });
  };
  const deliver = (body: string, signature = sign(body)) =>
    callDoor(postEvent, {
      path: '/api/provider-events',
      body,
      headers: { 'content-type': 'application/json', 'stripe-signature': signature },
    });

  it('refuses a wrong signature and keeps nothing', async () => {
    const body = await buildPaidEvent();
    const { response: answer } = await deliver(body, sign(body, 'whsec_of_somebody_else'));
    expect(answer.status).toBe(400);
    expect(answer.headers.get('content-type')).toBe('application/problem+json');
    expect(await database.db.select().from(providerEvents)).toHaveLength(0);
  });

  it('refuses a body that was changed on the way', async () => {
    const body = await buildPaidEvent();
    const { response: answer } = await deliver(body.replace('38900', '1'), sign(body));
    expect(answer.status).toBe(400);
  });

  it('makes one unit of five deliveries at once', async () => {
    const body = await buildPaidEvent();
    const answers = await Promise.all(Array.from({ length: 5 }, () => deliver(body)));
    expect(answers.map(({ response }) => response.status)).toEqual([200, 200, 200, 200, 200]);
    expect(await database.db.select().from(units)).toHaveLength(1);
    expect(await database.db.select().from(payments)).toHaveLength(1);
  });

  it('keeps what it does not know', async () => {
    const { response: answer } = await deliver(
      buildEvent({ object: 'invoice', id: 'in_1' }, 'invoice.finalized'),
    );
    expect(await answer.json()).toEqual({ state: 'unknown' });
    expect(await database.db.select().from(providerEvents)).toHaveLength(1);
  });
});

describe('an order through its door', () => {
  async function seedOrder() {
    const { orderId, number } = await seedPaidOrder(database.db, { pay: 'deposit' });
    const [buyer] = await database.db.select().from(userProfiles).orderBy(asc(userProfiles.userId));
    return { orderId, number, buyerId: buyer?.userId ?? 0 };
  }

  const read = async (number: number, person: ReturnType<typeof buildPerson> | null) => {
    const { response: answer } = await callDoor(getOrder, {
      method: 'GET',
      path: `/api/orders/${number}`,
      params: { number: String(number) },
      person,
    });
    return { status: answer.status, text: await answer.text() };
  };

  it('shows each what the table of roles opens, column by column', async () => {
    const { number, buyerId } = await seedOrder();
    const money = /totalMinor|balanceMinor|38900/;
    const address = /Heather Row|Quirin Quell/;
    const mail = /quirin@buyer\.test/;
    for (const [person, ...open] of [
      [buildPerson(buyerId), money, address, mail],
      [buildPerson(901, 'owner'), money, address, mail],
      [buildPerson(902, 'bookkeeper'), money, address, mail],
      [buildPerson(903, 'shipper'), address],
      [buildPerson(904, 'builder')],
      [buildPerson(905, 'tester')],
    ] as const) {
      const { status, text } = await read(number, person);
      expect(status).toBe(200);
      expect(text).toContain('Q0ABC');
      expect(text).toContain('"waitsForBalance":true');
      for (const secret of [money, address, mail]) {
        expect([person.roles, secret, secret.test(text)]).toEqual([
          person.roles,
          secret,
          open.some((opened) => opened === secret),
        ]);
      }
    }
  });

  it('is not there for another buyer, and asks the unsigned to sign in', async () => {
    const { number } = await seedOrder();
    expect((await read(number, buildPerson(906))).status).toBe(404);
    expect((await read(number, null)).status).toBe(401);
    expect((await read(999, buildPerson(901, 'owner'))).status).toBe(404);
  });

  it('takes money by hand from the owner only', async () => {
    const { number } = await seedOrder();
    const pay = (person: ReturnType<typeof buildPerson>) =>
      callDoor(postPayment, {
        path: `/api/orders/${number}/payments`,
        params: { number: String(number) },
        person,
        ...sendJson({ kind: 'cash', amountMinor: 28_900 }),
      });
    expect((await pay(buildPerson(904, 'builder'))).response.status).toBe(403);
    expect((await pay(buildPerson(906))).response.status).toBe(404);
  });

  it('opens a payment page for the balance to whoever has the link or the account', async () => {
    const { orderId, number, buyerId } = await seedOrder();
    const token = linkToken(env().secret, 'order', orderId);
    const { response: byLink } = await callDoor(postLinkCheckout, {
      path: `/api/orders/by-link/${token}/checkouts`,
      params: { token },
      ...sendJson({}),
    });
    expect(byLink.status).toBe(200);
    const wanted = (await database.db.select().from(checkouts)).filter(
      ({ purpose }) => purpose === 'balance',
    );
    expect(wanted.map(({ amountMinor }) => amountMinor)).toEqual([28_900]);
    const ask = (id: number) =>
      callDoor(postCheckout, {
        path: `/api/orders/${number}/checkouts`,
        params: { number: String(number) },
        person: buildPerson(id),
        ...sendJson({}),
      });
    expect((await ask(906)).response.status).toBe(404);
    expect((await ask(buyerId)).response.status).toBe(200);
    expect(await database.db.select().from(checkouts)).toHaveLength(2);
  });
});

describe('the public catalogue', () => {
  it('tells models, options, price and places left', async () => {
    await seedPaidOrder(database.db, { quantity: 2 });
    const { response: answer } = await callDoor(getModels, { method: 'GET', path: '/api/models' });
    expect(await answer.json()).toMatchObject({
      models: [
        {
          slug: 'holm-3',
          options: [{ group: 'bands', min: 3, max: 3 }, { group: 'receiver' }],
          batch: { number: 13, places: 20, placesLeft: 18, priceMinor: 38_900, currency: 'EUR' },
        },
      ],
    });
  });
});
