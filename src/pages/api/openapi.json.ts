import { z } from 'zod';
import { listDoors } from '~/server/api-routes';
import { door } from '~/server/door';
import { env } from '~/server/env';
import { describeApi } from '~/server/openapi/describe-api';
import { anyone } from '~/server/rules';

export const GET = door({
  rule: anyone,
  summary: 'This description',
  output: z.object({ openapi: z.literal('3.1.0'), paths: z.record(z.unknown()) }).passthrough(),
  run: async () => {
    const { doors } = await listDoors();
    return { ...describeApi(doors, env().baseUrl.origin) };
  },
});
