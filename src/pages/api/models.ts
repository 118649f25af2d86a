import { z } from 'zod';
import { dayOf } from '~/lib/dates';
import { paths } from '~/lib/paths';
import { newModel } from '~/schemas/bench-alone';
import { modelReading } from '~/schemas/order-reading';
import { door } from '~/server/door';
import { listRigs } from '~/server/queries/catalog/read-rig';
import { anyone, staff } from '~/server/rules';
import { drawUpModel } from '~/server/services/production/draw-up-model';

export const GET = door({
  rule: anyone,
  summary: 'The rigs that are for sale, with options, prices and places left',
  output: z.object({ models: z.array(modelReading) }),
  run: async ({ ctx, api }) => ({
    models: (await listRigs(ctx.db, dayOf(ctx.now, api.locals.works.timeZone))).map(({ groups, ...rig }) => ({
      ...rig,
      options: groups.map(({ key, label, min, max, options }) => ({ group: key, label, min, max, options })),
    })),
  }),
});

export const POST = door({
  rule: staff(),
  summary: 'Draw up a model in its smallest form, with a first test plan that is released at once',
  input: newModel,
  output: z.object({ modelId: z.number().int(), slug: z.string(), name: z.string(), letter: z.string() }),
  said: ({ name, letter }) => `${name} is drawn up, and its test plan ${letter} is released.`,
  next: () => paths.works(),
  run: ({ input, ctx }) => drawUpModel(input, ctx),
});
