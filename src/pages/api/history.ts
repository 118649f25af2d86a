import { z } from 'zod';
import { paths } from '~/lib/paths';
import { historyKeeping } from '~/schemas/history';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { keepHistory } from '~/server/services/bench/keep-history';

const counted = (n: number, one: string, many: string) => (n === 1 ? `One ${one}` : `${n} ${many}`);

export const POST = door({
  rule: staff('tester'),
  summary: 'Take the sheets of a table that was read into the books as history',
  input: historyKeeping,
  output: z.object({
    sheets: z.number().int(),
    readings: z.number().int(),
    skipped: z.number().int(),
    refused: z.number().int(),
  }),
  said: ({ sheets, readings, skipped }) =>
    `${counted(sheets, 'old sheet is', 'old sheets are')} kept as history with ${readings === 1 ? 'one reading' : `${readings} readings`}${skipped === 0 ? '' : `; ${counted(skipped, 'was', 'were')} here already`}.`,
  next: () => paths.history(),
  run: ({ input, ctx }) => keepHistory(input, ctx),
});
