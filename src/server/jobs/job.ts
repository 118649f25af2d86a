import type { Db } from '~/server/db/client';

/** What a job is called with. */
export interface JobCall {
  db: Db;
  now: Date;
  /** The same at every repetition: becomes the Message-ID or the idempotency key. */
  key: string;
  payload: Record<string, unknown>;
}

/** Thrown where trying again can never help; the row is given up and the owner sees it. */
export class NeverPossible extends Error {}
