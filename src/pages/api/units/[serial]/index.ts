import { z } from 'zod';
import { maySeeCallSign } from '~/domain/people/may-see';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { getUnitHistory } from '~/server/queries/production/get-unit-history';
import { everyStaff } from '~/server/rules';

const line = z.object({
  lineNo: z.number(),
  partNumber: z.string(),
  trace: z.string(),
  quantity: z.number(),
  picked: z.number(),
  missing: z.number(),
  lots: z.array(z.object({ lot: z.string(), quantity: z.number(), designators: z.array(z.string()) })),
});

export const GET = door({
  rule: everyStaff,
  summary: 'A unit: where it stands, what is in it by lot, its holds and reworks',
  params: z.object({ serial: z.string() }),
  output: z.object({
    serial: z.string(),
    model: z.string(),
    options: z.array(z.string()),
    stage: z.string(),
    batchNumber: z.number().nullable(),
    orderNumber: z.number().nullable(),
    callSign: z.string().nullable(),
    holds: z.array(z.object({ id: z.number(), on: z.string(), reason: z.string() })),
    inRework: z.boolean(),
    kit: z.array(line),
  }),
  run: async ({ params, ctx, person }) => {
    const found = await getUnitHistory(ctx.db, params.serial);
    if (found === null) throw new DomainError('not_found', `There is no unit ${params.serial}.`);
    const { unit, kit } = found;
    return {
      serial: unit.serial,
      model: unit.modelName,
      options: unit.options,
      stage: unit.stage,
      batchNumber: unit.batchNumber,
      orderNumber: unit.orderNumber,
      callSign: maySeeCallSign(person?.roles ?? [], unit.stage) ? unit.callSign : null,
      holds: unit.holds,
      inRework: unit.openRework !== null,
      kit: kit.map(({ part, picks, lineNo, quantity, picked, missing }) => ({
        ...{ lineNo, quantity, picked, missing, partNumber: part.partNumber, trace: part.trace },
        lots: picks.map((pick) => ({
          lot: pick.lotNumber,
          quantity: pick.quantity,
          designators: pick.designators,
        })),
      })),
    };
  },
});
