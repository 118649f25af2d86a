import { z } from 'zod';
import { dayOf } from '~/lib/dates';
import { modelReading } from '~/schemas/order-reading';
import { door } from '~/server/door';
import { listRigs } from '~/server/queries/catalog/read-rig';
import { anyone } from '~/server/rules';

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
