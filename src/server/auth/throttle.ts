const windowMs = 15 * 60_000;
const mostTries = 10;
const mostKeys = 10_000;

const tries = new Map<string, number[]>();

/**
 * Counts a try under a key and says whether it is one too many for the last quarter of an hour. Each
 * instance counts for itself.
 */
export function isTooMany(key: string, now: Date): boolean {
  const since = now.getTime() - windowMs;
  const recent = (tries.get(key) ?? []).filter((at) => at > since);
  recent.push(now.getTime());
  tries.delete(key);
  tries.set(key, recent.slice(-mostTries - 1));
  if (tries.size > mostKeys) {
    const oldest = tries.keys().next();
    if (oldest.done !== true) tries.delete(oldest.value);
  }
  return recent.length > mostTries;
}

/** A sign-in that went well clears what was mistyped before it. */
export function forgetTries(key: string): void {
  tries.delete(key);
}
