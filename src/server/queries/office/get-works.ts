import type { Reader } from '~/server/db/client';
import { works } from '~/server/db/schema';

/** What every page needs of the works' own data. */
export interface WorksSummary {
  name: string;
  timeZone: string;
  currency: string;
  country: string;
}

/** The works' own data; before the first owner has entered any, that of nobody. */
export async function getWorks(reader: Reader): Promise<WorksSummary> {
  const [row] = await reader
    .select({ name: works.name, timeZone: works.timeZone, currency: works.currency, country: works.country })
    .from(works)
    .limit(1);
  return row ?? { name: 'Rigwright', timeZone: 'UTC', currency: 'EUR', country: 'XX' };
}
