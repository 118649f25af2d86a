import Stripe from 'stripe';

/** What the provider's client needs from the settings. `apiUrl` null means the provider itself. */
interface PaymentsSettings {
  secretKey: string;
  apiUrl: URL | null;
}

const loopbackHosts = new Set(['127.0.0.1', 'localhost', '[::1]']);

/**
 * The provider's client. With `apiUrl` it talks to the local stand-in instead of the provider.
 *
 * A live key or a foreign host with `apiUrl` is refused: the secret key goes out with every call, and no
 * other machine than the provider's may see it.
 *
 * @throws {RangeError} when `apiUrl` is not on this machine or the key is a live one.
 */
export function paymentsClient({ secretKey, apiUrl }: PaymentsSettings): Stripe {
  const common = { telemetry: false, maxNetworkRetries: 2, timeout: 15_000 };
  if (!apiUrl) return new Stripe(secretKey, common);
  if (!loopbackHosts.has(apiUrl.hostname)) {
    throw new RangeError(
      `The payment stand-in must be on this machine, but its address names ${apiUrl.hostname}`,
    );
  }
  if (!/^[sr]k_test_/.test(secretKey)) {
    throw new RangeError('The payment stand-in takes test keys only; a live key must not be sent to it');
  }
  const protocol = apiUrl.protocol === 'https:' ? 'https' : 'http';
  return new Stripe(secretKey, {
    ...common,
    protocol,
    host: apiUrl.hostname.replace(/^\[|\]$/g, ''),
    port: apiUrl.port || (protocol === 'https' ? '443' : '80'),
  });
}
