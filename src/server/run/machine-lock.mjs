import { createHash } from 'node:crypto';
import { createServer } from 'node:net';

/**
 * The name of a Linux abstract socket for a purpose. The kernel gives such a name to one process at a
 * time and takes it back when that process ends, however it ends: nothing stale is ever left.
 *
 * @param {string} purpose
 */
export function socketName(purpose) {
  return `\0rigwright-${createHash('sha256').update(purpose).digest('hex').slice(0, 32)}`;
}

/**
 * Takes the lock of a purpose, or answers undefined when another process of this machine has it.
 *
 * @param {string} purpose
 * @returns {Promise<(() => Promise<void>) | undefined>} what gives the lock back
 */
export function tryLock(purpose) {
  return new Promise((resolve, reject) => {
    const server = createServer((socket) => socket.destroy());
    server.once('error', (error) => {
      if ('code' in error && error.code === 'EADDRINUSE') resolve(undefined);
      else reject(error);
    });
    server.listen(socketName(purpose), () => {
      server.unref();
      resolve(() => new Promise((done) => server.close(() => done())));
    });
  });
}

/**
 * Runs a task while no other process of this machine runs one of the same purpose; waits for its turn.
 *
 * @template T
 * @param {string} purpose
 * @param {() => Promise<T>} task
 * @param {() => void} [onWait] called once, when another process has the lock
 * @returns {Promise<T>}
 */
export async function withLock(purpose, task, onWait) {
  let told = false;
  for (;;) {
    const release = await tryLock(purpose);
    if (release) {
      try {
        return await task();
      } finally {
        await release();
      }
    }
    if (!told) onWait?.();
    told = true;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}
