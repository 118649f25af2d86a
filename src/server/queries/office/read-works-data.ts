import type { Reader } from '~/server/db/client';
import { works } from '~/server/db/schema';

/** All of the works' own data, for the office; null before there is an owner. */
export async function readWorksData(reader: Reader) {
  const [row] = await reader.select().from(works).limit(1);
  return row ?? null;
}
