import { z } from 'zod';
import { judgeRun, pointLabel } from '~/domain/bench/judge-run';
import { judgementSchema, stationSchema } from '~/schemas/bench-station';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { readStation } from '~/server/queries/bench/read-station';
import { staff } from '~/server/rules';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'A run with its points, readings, verdicts and who has it',
  params: z.object({ id: z.coerce.number().int() }),
  output: stationSchema.extend({
    judgements: z.array(judgementSchema),
    outcome: z.object({ result: z.string(), canClose: z.boolean(), why: z.array(z.string()) }),
  }),
  run: async ({ params, ctx }) => {
    const station = await readStation(ctx.db, params.id);
    if (station === null) throw new DomainError('not_found', 'There is no such run.');
    const { judgements, result } = judgeRun(station.sheet);
    return {
      ...station,
      outcome: result,
      judgements: station.sheet.points.flatMap((point) => {
        const judgement = judgements.get(point.id);
        return judgement === undefined
          ? []
          : [{ ...judgement, testPointId: point.id, label: pointLabel(point) }];
      }),
    };
  },
});
