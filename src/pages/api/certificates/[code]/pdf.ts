import { z } from 'zod';
import { door } from '~/server/door';
import { readCertificatePdf } from '~/server/documents/read-certificate-pdf';
import { anyone } from '~/server/rules';

// Anyone may ask, since a buyer has a link and not always an account; the document checks whose it is.
export const GET = door({
  rule: anyone,
  summary: 'A certificate’s PDF, byte for byte: for the works, and for its buyer by account or order link',
  params: z.object({ code: z.string().max(40) }),
  query: z.object({ order: z.string().max(100).optional() }),
  output: 'file',
  run: ({ params, query, person, ctx }) =>
    readCertificatePdf(ctx.db, { code: params.code, orderLink: query.order, person }),
});
