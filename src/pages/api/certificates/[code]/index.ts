import { z } from 'zod';
import { verifyCertificate } from '~/server/queries/certificates/verify-certificate';
import { publicStatementSchema } from '~/schemas/certificate-statement';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { anyone } from '~/server/rules';

export const GET = door({
  rule: anyone,
  summary: 'A certificate as anyone may see it: readings, signature, whether it is current',
  params: z.object({ code: z.string().max(40) }),
  output: z.object({
    statement: publicStatementSchema,
    signature: z.object({
      algorithm: z.literal('Ed25519'),
      keyId: z.string(),
      publicKey: z.string(),
      value: z.string(),
    }),
    signatureHolds: z.boolean(),
    replacedBy: z.string().nullable(),
    newerNumber: z.string().nullable(),
    pdfSha256: z.string().nullable(),
  }),
  run: async ({ params, ctx }) => {
    const found = await verifyCertificate(ctx.db, params.code);
    if (!found.ok) throw new DomainError('not_found', found.reason);
    const { statement, signature, replacedBy, newerNumber, pdfSha256 } = found.certificate;
    return { statement, signature, signatureHolds: found.signatureHolds, replacedBy, newerNumber, pdfSha256 };
  },
});
