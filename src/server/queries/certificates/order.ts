import { asc } from 'drizzle-orm';
import { certificates } from '~/server/db/schema';

/**
 * The certificates of a unit so that the last one counts: by run, then by number, then by letter. By time alone, an
 * amended certificate of an older run would pass for the newest; see `standingOf`.
 */
export const oldestFirst = [
  asc(certificates.testRunId),
  asc(certificates.number),
  asc(certificates.id),
] as const;
