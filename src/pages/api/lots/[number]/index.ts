import { z } from 'zod';
import { maySeeCallSign, maySeeStockValue } from '~/domain/people/may-see';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { getLot } from '~/server/queries/stores/get-lot';
import { everyStaff } from '~/server/rules';

export const GET = door({
  rule: everyStaff,
  summary: 'A lot with its ledger and the units that parts of it are in',
  params: z.object({ number: z.string() }),
  output: z.object({
    lot: z.object({
      number: z.string(),
      partNumber: z.string(),
      state: z.string(),
      barredReason: z.string().nullable(),
      onHand: z.number(),
      quantityReceived: z.number(),
      costMinor: z.number().nullable(),
      currency: z.string().nullable(),
    }),
    entries: z.array(
      z.object({ id: z.number(), kind: z.string(), quantity: z.number(), reason: z.string(), at: z.date() }),
    ),
    units: z.array(
      z.object({
        serial: z.string(),
        stage: z.string(),
        quantity: z.number().nullable(),
        designators: z.array(z.string()),
        batchNumber: z.number().nullable(),
        callSign: z.string().nullable(),
      }),
    ),
  }),
  run: async ({ params, ctx, person }) => {
    const found = await getLot(ctx.db, params.number);
    if (found === null) throw new DomainError('not_found', `There is no lot ${params.number}.`);
    const roles = person?.roles ?? [];
    const { lot } = found;
    return {
      entries: found.entries,
      lot: maySeeStockValue(roles) ? lot : { ...lot, costMinor: null, currency: null },
      units: found.units.map((unit) => ({
        ...unit,
        callSign: maySeeCallSign(roles, unit.stage) ? unit.callSign : null,
      })),
    };
  },
});
