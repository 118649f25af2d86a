import { z } from 'zod';
import { maySeeStockValue } from '~/domain/people/may-see';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { getPart } from '~/server/queries/stores/get-part';
import { everyStaff } from '~/server/rules';

const lot = z.object({
  number: z.string(),
  state: z.string(),
  onHand: z.number(),
  quantityReceived: z.number(),
  costMinor: z.number().nullable(),
  currency: z.string().nullable(),
  bin: z.string().nullable(),
  receivedAt: z.date(),
});

export const GET = door({
  rule: everyStaff,
  summary: 'A part with its lots',
  params: z.object({ number: z.string() }),
  output: z.object({
    part: z.object({
      number: z.string(),
      description: z.string(),
      value: z.string(),
      footprint: z.string(),
      unit: z.string(),
      trace: z.string(),
    }),
    lots: z.array(lot),
  }),
  run: async ({ params, ctx, person }) => {
    const found = await getPart(ctx.db, params.number);
    if (found === null) throw new DomainError('not_found', `There is no part ${params.number}.`);
    const { part, lots } = found;
    if (maySeeStockValue(person?.roles ?? [])) return { part, lots };
    return { part, lots: lots.map((one) => ({ ...one, costMinor: null, currency: null })) };
  },
});
