import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PostalAddress } from './address';
import { addressGaps } from './address';
import { checkPlaces, freePlaces, holdEnd, isCallSignShape } from './checkout';
import type { OrderState } from './status';
import { balanceDueMinor, orderCan, orderStates } from './status';

describe('an order', () => {
  const allowed: Record<keyof typeof orderCan, OrderState[]> = {
    pay: ['awaiting_payment'],
    payBalance: ['paid'],
    cancel: ['awaiting_payment', 'paid'],
    fulfil: ['paid'],
    ship: ['paid'],
  };

  it.each(Object.entries(orderCan))('can %s only in the right states', (deed, can) => {
    for (const state of orderStates) {
      const expected = Object.entries(allowed).some(
        ([key, states]) => key === deed && states.includes(state),
      );
      expect([state, can(state).ok]).toEqual([state, expected]);
    }
  });

  it.each([
    [orderCan.pay('cancelled'), 'The order is cancelled and cannot be paid for again.'],
    [orderCan.cancel('fulfilled'), 'The order is shipped and cannot be cancelled.'],
    [orderCan.ship('awaiting_payment'), 'The order waits for payment; nothing is sent for it.'],
    [orderCan.fulfil('awaiting_payment'), 'The order waits for payment and cannot be closed as shipped.'],
  ])('says why not', (answer, reason) => {
    expect(answer).toEqual({ ok: false, reason });
  });

  it('has a balance until all is paid', () => {
    expect(balanceDueMinor({ totalMinor: 43_700, paidMinor: 10_000, refundedMinor: 0 })).toBe(33_700);
    expect(balanceDueMinor({ totalMinor: 43_700, paidMinor: 43_700, refundedMinor: 700 })).toBe(700);
    expect(balanceDueMinor({ totalMinor: 43_700, paidMinor: 50_000, refundedMinor: 0 })).toBe(0);
  });
});

describe('places', () => {
  it.each([
    [{ places: 20, taken: 12, held: 1 }, 7, { ok: true, free: 0 }],
    [{ places: 20, taken: 12, held: 1 }, 1, { ok: true, free: 6 }],
    [{ places: 20, taken: 20, held: 0 }, 1, { ok: false, reason: 'No place is left in this batch.' }],
    [{ places: 20, taken: 18, held: 0 }, 3, { ok: false, reason: 'Only 2 places are left in this batch.' }],
    [{ places: 20, taken: 19, held: 0 }, 2, { ok: false, reason: 'Only 1 place is left in this batch.' }],
    [{ places: 20, taken: 1, held: 0 }, 0, { ok: false, reason: 'Choose how many rigs: one or more.' }],
    [{ places: 20, taken: 1, held: 0 }, 1.5, { ok: false, reason: 'Choose how many rigs: one or more.' }],
    [
      { places: 20, taken: 19, held: 1 },
      1,
      {
        ok: false,
        reason:
          'No place is left in this batch. One place is held by somebody who is paying now and may come free within 30 minutes.',
      },
    ],
  ])('%j, %s wanted', (batch, quantity, expected) => {
    expect(checkPlaces(batch, quantity)).toEqual(expected);
  });

  it('taken and held never exceed the batch, whatever is asked for in whatever order', () => {
    fc.assert(
      fc.property(
        fc.nat(30),
        fc.array(fc.record({ quantity: fc.integer({ min: -1, max: 9 }), pays: fc.boolean() })),
        (places, wishes) => {
          const batch = { places, taken: 0, held: 0 };
          for (const { quantity, pays } of wishes) {
            const before = freePlaces(batch);
            const answer = checkPlaces(batch, quantity);
            expect(answer.ok).toBe(quantity >= 1 && quantity <= before);
            if (!answer.ok) continue;
            batch[pays ? 'taken' : 'held'] += quantity;
            expect(freePlaces(batch)).toBe(answer.free);
            expect(batch.taken + batch.held).toBeLessThanOrEqual(places);
          }
        },
      ),
    );
  });

  it('are held for half an hour', () => {
    expect(holdEnd(new Date('2027-03-09T23:45:00.500Z'))).toEqual(new Date('2027-03-10T00:15:00.500Z'));
  });
});

describe('call signs', () => {
  it.each([
    'Q0ABC',
    'q1x',
    'QA2XYZ',
    'QB1Q',
    'QC50JUB',
    '2Q0AAA',
    'QD/Q0ABC',
    'Q0ABC/P',
    'QD/Q0ABC/MM',
    ' Q0ABC ',
  ])('%s has the shape of one', (text) => expect(isCallSignShape(text)).toBe(true));
  it.each(['', 'ABC', '123', 'Q0', 'Q0ABC!', 'Ann Holm', '12345', 'Q0ABC/P/M/A', '/'])('%j has not', (text) =>
    expect(isCallSignShape(text)).toBe(false),
  );
});

describe('an address', () => {
  const full: PostalAddress = {
    name: 'Ann Tester',
    addressLines: ['1 Thistle Lane', ''],
    city: 'Nowhere',
    region: '',
    postcode: 'Q1 2QQ',
    country: 'GB',
  };
  it.each([
    [{}, []],
    [{ addressLines: ['', ' '] }, ['the street']],
    [{ addressLines: [] }, ['the street']],
    [{ name: '', city: ' ', postcode: '' }, ['the name', 'the town', 'the postcode']],
    [{ country: 'Britain' }, ['the country']],
    [{ country: 'US' }, ['the state or province']],
    [{ country: 'US', region: 'QQ' }, []],
    [{ country: 'HK', postcode: '' }, []],
  ])('with %j lacks %j', (change, gaps) => {
    expect(addressGaps({ ...full, ...change })).toEqual(gaps);
  });
});
