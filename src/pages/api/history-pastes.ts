import { z } from 'zod';
import { paths } from '~/lib/paths';
import { historyPaste } from '~/schemas/history';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { keepHistoryPaste } from '~/server/services/bench/keep-history-paste';

export const POST = door({
  rule: staff('tester'),
  summary: 'Read a table of old test sheets of a model',
  input: historyPaste,
  maxBytes: 8 * 1024 * 1024,
  output: z.object({ fileId: z.number().int(), model: z.string() }),
  next: ({ fileId, model }) => paths.history({ file: String(fileId), model }),
  run: ({ input, ctx }) => keepHistoryPaste(input, ctx),
});
