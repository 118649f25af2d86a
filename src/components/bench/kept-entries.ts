import { z } from 'zod';
import type { Entry } from './run-sheet';

/** An entry that the server may not have yet. */
export interface KeptEntry {
  /** Idempotency key: sent again after a reload, it is taken once. */
  key: string;
  entry: Entry;
  /** Why the server refused it; absent while it is on its way. */
  refused?: string | undefined;
  /** Key of an earlier entry into the same cell that has to be taken first. */
  after?: string | undefined;
}

const keptSchema = z.array(
  z.object({
    key: z.string(),
    entry: z.object({
      testPointId: z.number(),
      text: z.string(),
      columnUnit: z.string().optional(),
      again: z.boolean(),
      instrumentRevisionId: z.number().nullable(),
      pathRevisionId: z.number().nullable(),
      confirmed: z.boolean(),
      attenuationHeld: z.boolean(),
      version: z.number(),
    }),
    refused: z.string().optional(),
    after: z.string().optional(),
  }),
);

const nameOf = (runId: number) => `rigwright-run-${runId}-entries`;

/** Entries of a run that a reload or a dead network has left in this browser. */
export function loadEntries(runId: number): KeptEntry[] {
  try {
    return keptSchema.parse(JSON.parse(localStorage.getItem(nameOf(runId)) ?? '[]'));
  } catch {
    return [];
  }
}

/** Keeps the entries of a run until the server has them. */
export function saveEntries(runId: number, entries: readonly KeptEntry[]): void {
  if (entries.length === 0) localStorage.removeItem(nameOf(runId));
  else localStorage.setItem(nameOf(runId), JSON.stringify(entries));
}
