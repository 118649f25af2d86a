import { z } from 'zod';
import { dailyCheckEntry } from '~/schemas/bench-checks';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { recordDailyCheck } from '~/server/services/bench/record-daily-check';

function inDoubt(flagged: number): string {
  if (flagged === 0) return 'No run was closed since it was last good.';
  return flagged === 1
    ? 'One run closed since it was last good is flagged for the owner.'
    : `${flagged} runs closed since it was last good are flagged for the owner.`;
}

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
      : `Written down: ${number} is off by ${deviation}, outside its band. ${inDoubt(flagged)}`,
  run: ({ input, ctx }) => recordDailyCheck(input, ctx),
});
