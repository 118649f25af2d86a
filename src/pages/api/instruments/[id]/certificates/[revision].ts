import { z } from 'zod';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { findCertificateFile } from '~/server/queries/bench/read-instrument';
import { readFile } from '~/server/queries/files/read-file';
import { staff } from '~/server/rules';

export const GET = door({
  rule: staff('builder', 'tester'),
  summary: 'The calibration certificate of a revision of an instrument, as it came',
  params: z.object({ id: z.coerce.number().int(), revision: z.coerce.number().int() }),
  output: 'file',
  run: async ({ params, ctx }) => {
    const fileId = await findCertificateFile(ctx.db, params.id, params.revision);
    if (fileId === null) throw new DomainError('not_found', 'This revision has no certificate as a file.');
    const { bytes, mediaType, name } = await readFile(ctx.db, fileId);
    return { bytes, mediaType, fileName: name };
  },
});
