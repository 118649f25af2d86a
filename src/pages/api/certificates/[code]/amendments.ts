import { z } from 'zod';
import { paths } from '~/lib/paths';
import { certificateAmendmentSchema } from '~/schemas/certificate-amendment';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { amendCertificate } from '~/server/services/certificates/amend-certificate';

export const POST = door({
  rule: staff('tester'),
  summary: 'Amend a certificate whose facts around the readings are wrong: the same number, the next letter',
  params: z.object({ code: z.string().max(12) }),
  input: certificateAmendmentSchema,
  output: z.object({ certificateId: z.number().int(), number: z.string(), code: z.string() }),
  said: ({ number }) => `Certificate ${number} is issued; its PDF follows within seconds.`,
  next: ({ number }) => paths.worksCertificate(number),
  run: ({ params, input, ctx }) => amendCertificate({ ...params, ...input }, ctx),
});
