import { liveSchema } from '~/schemas/live';
import { door } from '~/server/door';
import { changeStream } from '~/server/live/change-stream';
import { ledgerTail } from '~/server/live/ledger-tail';
import { everyStaff } from '~/server/rules';

export const GET = door({
  rule: everyStaff,
  summary: 'Follow the changes to some things, as server-sent events',
  query: liveSchema,
  output: 'stream',
  run: ({ query, ctx, person }) =>
    Promise.resolve(
      changeStream({ tail: ledgerTail, reader: ctx.db, subjects: query.subject, userId: person?.id ?? null }),
    ),
});
