import { isNull } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { signingKeys, works } from '~/server/db/schema';

/** All of the works' own data, for the office; null before there is an owner. */
export async function readWorksData(reader: Reader) {
  const [row] = await reader.select().from(works).limit(1);
  return row ?? null;
}

/** The works' present signing key, by name and date. */
export async function readPresentKey(reader: Reader) {
  const [row] = await reader
    .select({ keyId: signingKeys.keyId, createdAt: signingKeys.createdAt })
    .from(signingKeys)
    .where(isNull(signingKeys.retiredAt))
    .limit(1);
  return row ?? null;
}
