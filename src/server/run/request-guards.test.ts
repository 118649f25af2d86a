import { expect, test } from 'vitest';
import { callerAddress, parseProxies } from './request-guards';

const proxies = parseProxies('10.0.0.1, ::1,not-an-address');

test.each([
  ['a stranger is not believed', '203.0.113.5', '198.51.100.1', '203.0.113.5'],
  ['a proxy of ours is', '10.0.0.1', '198.51.100.1', '198.51.100.1'],
  ['only as far as the nearest stranger', '10.0.0.1', '192.0.2.7, 198.51.100.1', '198.51.100.1'],
  ['through two proxies of ours', '::1', '198.51.100.1, 10.0.0.1', '198.51.100.1'],
  ['IPv4 in IPv6 clothes', '::ffff:10.0.0.1', '198.51.100.1', '198.51.100.1'],
  ['a proxy that says nothing', '10.0.0.1', undefined, '10.0.0.1'],
  ['a proxy that says nonsense', '10.0.0.1', 'unknown', '10.0.0.1'],
])('%s', (_name, peer, forwardedFor, address) => {
  expect(callerAddress(peer, forwardedFor, proxies)).toBe(address);
});
