import { createHmac } from 'node:crypto';
import Stripe from 'stripe';
import { describe, expect, it } from 'vitest';
import { verifyProviderEvent } from '~/server/payments/verify-event';

// Scheme: Stripe's documentation "Verify webhook signatures": the header is t=…,v1=…[,v1=…][,v0=…]; v1 is the
// hex HMAC-SHA256 of `t + "." + raw body` under the endpoint's secret; v0 and unknown schemes are ignored;
// tolerance 300 s. That the secret is used whole, `whsec_` included, is from memory; the SDK agrees below.
// Vector: calculated once outside of this program.
const secret = 'whsec_test_secret_0123456789abcdef';
const time = 1_700_000_000;
const minimalBody = '{"id":"evt_test_1","object":"event","type":"checkout.session.completed"}';
const minimalSignature = '31f29de00c8d45913808e9d255e3e875d6eb7e0b59870602fc4b96dbcf0861b0';

const body =
  '{"id": "evt_test_1", "object": "event", "type": "checkout.session.completed", "created": 1700000000, "livemode": false, "data": {"object": {"id": "cs_test_1"}}}';

function sign(text: string, at = time, key = secret): string {
  return createHmac('sha256', key).update(`${at}.${text}`, 'utf8').digest('hex');
}

function check(text: string, header: string | null, now = time, secrets: string[] = [secret]): string {
  const result = verifyProviderEvent(text, header, secrets, now);
  return result.ok ? result.event.id : result.reason;
}

describe('HMAC-SHA256', () => {
  it('gives the digest of RFC 4231, test case 2', () => {
    const digest = createHmac('sha256', 'Jefe').update('what do ya want for nothing?').digest('hex');
    expect(digest).toBe('5bdcc146bf60754e6a042426089575c75a003f089d2739839dec58b964ec3843');
  });
});

describe('the signature of a provider event', () => {
  it('is the one calculated outside', () => {
    expect(Buffer.byteLength(minimalBody)).toBe(72);
    expect(sign(minimalBody)).toBe(minimalSignature);
    const header = Stripe.webhooks.generateTestHeaderString({
      payload: minimalBody,
      secret,
      timestamp: time,
    });
    expect(header).toBe(`t=${time},v1=${minimalSignature}`);
  });

  it('opens the calculated vector: signed rightly, though its envelope lacks created and data', () => {
    expect(check(minimalBody, `t=${time},v1=${minimalSignature}`)).toBe('not_an_event');
    expect(check(minimalBody, `t=${time},v1=${minimalSignature.replace('3', '4')}`)).toBe('wrong_signature');
  });

  it.each([
    ['as sent', body, `t=${time},v1=${sign(body)}`, 'evt_test_1'],
    [
      'a wrong first v1 and a right second',
      body,
      `t=${time},v1=${'0'.repeat(64)},v1=${sign(body)}`,
      'evt_test_1',
    ],
    ['an unknown scheme beside', body, `t=${time},v9=abc,v1=${sign(body)},v0=abc`, 'evt_test_1'],
    [
      'one byte changed',
      body.replace('cs_test_1', 'cs_test_2'),
      `t=${time},v1=${sign(body)}`,
      'wrong_signature',
    ],
    ['written again', JSON.stringify(JSON.parse(body)), `t=${time},v1=${sign(body)}`, 'wrong_signature'],
    ['a line break added', `${body}\n`, `t=${time},v1=${sign(body)}`, 'wrong_signature'],
    ['only v0', body, `t=${time},v0=${sign(body)}`, 'malformed_signature'],
    ['another time than signed', body, `t=${time + 1},v1=${sign(body)}`, 'wrong_signature'],
    ['two times', body, `t=${time},t=${time},v1=${sign(body)}`, 'malformed_signature'],
    ['a time with a tail', body, `t=${time}x,v1=${sign(body)}`, 'malformed_signature'],
    ['no time', body, `v1=${sign(body)}`, 'malformed_signature'],
    ['an empty v1', body, `t=${time},v1=`, 'wrong_signature'],
    ['an empty header', body, '', 'no_signature'],
    ['no header', body, null, 'no_signature'],
    ['no body', '', `t=${time},v1=${sign('')}`, 'wrong_signature'],
    ['signed, but not JSON', 'hello', `t=${time},v1=${sign('hello')}`, 'not_an_event'],
  ])('%s', (_name, text, header, outcome) => {
    expect(check(text, header)).toBe(outcome);
  });

  it.each([
    ['300 s old', 300, 'evt_test_1'],
    ['301 s old', 301, 'too_old'],
    ['a minute ahead', -60, 'evt_test_1'],
    ['61 s ahead', -61, 'in_the_future'],
  ])('%s', (_name, ageS, outcome) => {
    expect(check(body, `t=${time},v1=${sign(body)}`, time + ageS)).toBe(outcome);
  });

  it('is accepted under either secret while one replaces the other, and under no third', () => {
    const underNew = `t=${time},v1=${sign(body, time, 'whsec_new')}`;
    expect(check(body, underNew, time, ['whsec_old', 'whsec_new'])).toBe('evt_test_1');
    expect(check(body, underNew, time, ['whsec_new', 'whsec_old'])).toBe('evt_test_1');
    expect(check(body, underNew, time, ['whsec_old'])).toBe('wrong_signature');
    expect(check(body, underNew, time, [])).toBe('wrong_signature');
    expect(check(body, underNew, time, [''])).toBe('wrong_signature');
  });

  it('uses the secret whole, with its prefix', () => {
    const withoutPrefix = `t=${time},v1=${sign(body, time, secret.replace('whsec_', ''))}`;
    expect(check(body, withoutPrefix)).toBe('wrong_signature');
  });
});
