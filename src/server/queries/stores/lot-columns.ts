import { bins, lots, suppliers } from '~/server/db/schema';

/** What is shown of a lot; for a query that joins the supplier and the bin of it. */
export const lotColumns = {
  number: lots.number,
  state: lots.state,
  barredReason: lots.barredReason,
  onHand: lots.onHand,
  quantityReceived: lots.quantityReceived,
  costMinor: lots.costMinor,
  currency: lots.currency,
  dateCode: lots.dateCode,
  receivedAt: lots.receivedAt,
  supplier: suppliers.name,
  bin: bins.code,
};
