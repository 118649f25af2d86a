import { z } from 'zod';
import { paths } from '~/lib/paths';
import { bomAcceptance } from '~/schemas/production-models';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { acceptBomUpload } from '~/server/services/production/accept-bom-upload';

export const POST = door({
  rule: staff(),
  summary: 'Make a draft BOM revision of a file that was read',
  params: z.object({ slug: z.string() }),
  input: bomAcceptance,
  maxBytes: 256 * 1024,
  output: z.object({
    bomRevisionId: z.number().int(),
    letter: z.string(),
    lines: z.number().int(),
    partsEntered: z.number().int(),
  }),
  said: ({ letter, lines, partsEntered }) =>
    `BOM ${letter} is drafted with ${lines} lines; ${partsEntered === 0 ? 'no part' : partsEntered === 1 ? 'one part' : `${partsEntered} parts`} had to be entered.`,
  next: ({ letter }, { params }) => paths.worksModel(params.slug, { show: 'bom', letter }),
  run: ({ params, input, ctx }) => acceptBomUpload({ ...input, model: params.slug }, ctx),
});
