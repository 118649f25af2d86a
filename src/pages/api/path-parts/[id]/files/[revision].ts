import { z } from 'zod';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { findLossFile } from '~/server/queries/bench/read-path-part';
import { readFile } from '~/server/queries/files/read-file';
import { staff } from '~/server/rules';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'The file that the loss of a revision of a path part was read from',
  params: z.object({ id: z.coerce.number().int(), revision: z.coerce.number().int() }),
  output: 'file',
  run: async ({ params, ctx }) => {
    const fileId = await findLossFile(ctx.db, params.id, params.revision);
    if (fileId === null) throw new DomainError('not_found', 'The loss of this revision was typed.');
    const { bytes, mediaType, name } = await readFile(ctx.db, fileId);
    return { bytes, mediaType, fileName: name };
  },
});
