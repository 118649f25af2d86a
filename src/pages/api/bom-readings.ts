import { z } from 'zod';
import { paths } from '~/lib/paths';
import { bomUpload } from '~/schemas/production-models';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { keepBomUpload } from '~/server/services/production/keep-bom-upload';

export const POST = door({
  rule: staff(),
  summary: 'Read a bill of materials for a model (multipart: model, file)',
  input: bomUpload,
  maxBytes: 2 * 1024 * 1024,
  output: z.object({
    fileId: z.number().int(),
    model: z.string(),
    questions: z.array(z.string()),
    partCount: z.number().int(),
  }),
  next: ({ fileId, model }) => paths.bomImport(model, fileId),
  run: async ({ input, ctx }) => {
    const bytes = new Uint8Array(await input.file.arrayBuffer());
    return keepBomUpload({ model: input.model, bytes, name: input.file.name }, ctx);
  },
});
