import { z } from 'zod';
import { release } from '~/schemas/production-models';
import type { RevisionKind } from '~/schemas/production-models';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import {
  releaseBomRevision,
  releaseBuildSheetRevision,
  releaseTestPlanRevision,
} from '~/server/services/production/release-revision';

const services = {
  bom: releaseBomRevision,
  build_sheet: releaseBuildSheetRevision,
  test_plan: releaseTestPlanRevision,
} satisfies Record<RevisionKind, typeof releaseBomRevision>;

export const POST = door({
  rule: staff(),
  summary: 'Release a draft BOM, build sheet or test plan of a model',
  params: z.object({ slug: z.string() }),
  input: release,
  output: z.object({ revisionId: z.number().int(), letter: z.string() }),
  said: ({ letter }) => `Revision ${letter} is released and does not change any more.`,
  run: ({ params, input, ctx }) => services[input.kind]({ model: params.slug, letter: input.letter }, ctx),
});
