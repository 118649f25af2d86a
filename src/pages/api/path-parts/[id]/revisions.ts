import { z } from 'zod';
import { listed } from '~/lib/listed';
import { paths } from '~/lib/paths';
import { MAX_LOSS_BYTES, pathPartRevision } from '~/schemas/bench-equipment';
import { door } from '~/server/door';
import { sentFile } from '~/lib/sent-file';
import { staff } from '~/server/rules';
import { revisePathPart } from '~/server/services/bench/revise-path-part';

export const POST = door({
  rule: staff('tester'),
  summary: 'Give a path part its next revision, and with it every path in use that holds it',
  params: z.object({ id: z.coerce.number().int() }),
  input: pathPartRevision,
  maxBytes: MAX_LOSS_BYTES * 2,
  output: z.object({
    pathPartId: z.number().int(),
    number: z.string(),
    revision: z.number().int(),
    paths: z.array(z.string()),
    note: z.string(),
  }),
  said: ({ revision, paths: revised, note }) =>
    [
      `Revision ${revision} applies from now on${revised.length === 0 ? '' : `, and in ${listed(revised)}`}.`,
      note,
    ]
      .join(' ')
      .trim(),
  next: ({ number }) => paths.pathPart(number),
  run: async ({ params, input, ctx }) =>
    revisePathPart({ ...input, pathPartId: params.id, lossFile: await sentFile(input.lossFile) }, ctx),
});
