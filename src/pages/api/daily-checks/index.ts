import { z } from 'zod';
import { dailyCheckEntry } from '~/schemas/bench-checks';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { recordDailyCheck } from '~/server/services/bench/record-daily-check';

export const POST = door({
  rule: staff('tester'),
  summary: 'Write down what a reference of the daily check reads',
  input: dailyCheckEntry,
  output: z.object({
    dailyCheckId: z.number().int(),
    number: z.string(),
    isGood: z.boolean(),
    deviation: z.string(),
    flagged: z.number().int(),
  }),
  said: ({ number, isGood, deviation, flagged }) =>
    isGood
      ? `${number} is inside its band, off by ${deviation}.`
      : `${number} is outside its band, off by ${deviation}: no run can be closed until it is explained. ` +
        `${flagged === 1 ? '1 run is' : `${flagged} runs are`} flagged for the owner.`,
  run: ({ input, ctx }) => recordDailyCheck(input, ctx),
});
