import { hash, verify } from '@node-rs/argon2';

/** argon2id at 19 MiB, two passes, one lane (OWASP's floor for it, from memory). */
const cost = { memoryCost: 19456, timeCost: 2, parallelism: 1 };

/** Hashes a password for keeping. */
export function hashPassword(password: string): Promise<string> {
  return hash(password, cost);
}

/** Whether a password is the one that was hashed; takes as long where there is no such account. */
export async function passwordFits(kept: string | null, password: string): Promise<boolean> {
  if (kept !== null) return verify(kept, password);
  await hash(password, cost);
  return false;
}
