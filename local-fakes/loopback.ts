const loopbackHosts = new Set(['127.0.0.1', 'localhost', '[::1]']);

/** Whether `address` is an http(s) address on this very machine. */
export function isLoopback(address: string): boolean {
  if (!URL.canParse(address)) return false;
  const url = new URL(address);
  return (url.protocol === 'http:' || url.protocol === 'https:') && loopbackHosts.has(url.hostname);
}

/**
 * Stops a stand-in from running beside an application that the world can reach: whoever finds it there
 * could mark an order as paid.
 *
 * @throws {Error} naming `what` when `address` is not on this machine.
 */
export function assertLoopback(what: string, address: string): void {
  if (!isLoopback(address)) {
    throw new Error(
      `A stand-in for an outside service runs only on this machine, but ${what} is ${address}. ` +
        'Set the real service in the environment instead.',
    );
  }
}
