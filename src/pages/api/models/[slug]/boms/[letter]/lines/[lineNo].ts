import { z } from 'zod';
import { bomLineChange } from '~/schemas/production-models';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { changeBomLine } from '~/server/services/production/change-bom-line';

export const POST = door({
  rule: staff(),
  summary: 'Change a line of a draft BOM',
  params: z.object({ slug: z.string(), letter: z.string(), lineNo: z.coerce.number().int().positive() }),
  input: bomLineChange,
  output: z.object({ letter: z.string(), lineNo: z.number().int() }),
  said: ({ letter, lineNo }) => `Line ${lineNo} of BOM ${letter} is changed.`,
  run: ({ params, input, ctx }) => {
    const { slug, letter, lineNo } = params;
    return changeBomLine({ ...input, model: slug, letter, lineNo }, ctx);
  },
});
