import { db } from '~/server/db/client';
import { log } from '~/server/log';
import { tailLedger } from './tail';

/** This instance's one tail of the ledger of changes. */
export const ledgerTail = tailLedger({
  reader: db,
  everyMs: 250,
  rereadMs: 15_000,
  onError: (error) => log.error({ err: error }, 'the ledger of changes could not be followed'),
});
