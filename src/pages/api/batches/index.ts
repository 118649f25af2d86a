import { paths } from '~/lib/paths';
import { batchListing, batchOpened, batchOpening } from '~/schemas/planning-batches';
import { seesPrices } from '~/domain/people/roles';
import { door } from '~/server/door';
import { listBatches } from '~/server/queries/planning/list-batches';
import { everyStaff, staff } from '~/server/rules';
import { openBatch } from '~/server/services/planning/open-batch';

export const GET = door({
  rule: everyStaff,
  summary: 'Batches with their places; prices for the owner and the bookkeeper',
  output: batchListing,
  run: ({ person, ctx }) => listBatches(ctx.db, { withPrices: seesPrices(person?.roles ?? []), limit: 500 }),
});

export const POST = door({
  rule: staff(),
  summary: 'Open a batch of a model, built to what is released now',
  input: batchOpening,
  output: batchOpened,
  next: ({ number }) => paths.batch(number),
  said: ({ number }) => `Batch ${number} is open for orders.`,
  run: ({ input, ctx }) => openBatch(input, ctx),
});
