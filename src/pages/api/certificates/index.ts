import { z } from 'zod';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { issueCertificate } from '~/server/services/certificates/issue-certificate';

export const POST = door({
  rule: staff('tester'),
  summary: 'Issue the certificate of a closed, passed run',
  input: z.object({ runId: z.coerce.number().int().positive() }),
  output: z.object({ certificateId: z.number().int(), number: z.string(), code: z.string() }),
  said: ({ number }) => `Certificate ${number} is issued; its PDF follows within seconds.`,
  run: ({ input, ctx }) => issueCertificate(input, ctx),
});
