import { z } from 'zod';

/** The last values that closed runs of the same model kept for a point, and then what old sheets say: the newest first. */
export const alikePoint = z.object({
  testPointId: z.number().int(),
  quantityKey: z.string(),
  band: z.string().nullable(),
  values: z.array(
    z.object({
      /** At the unit, in the unit of the quantity. */
      value: z.number(),
      /** Null for an old sheet: nothing was judged. */
      verdict: z.enum(['pass', 'too_close', 'fail', 'not_run']).nullable(),
      serial: z.string(),
      runNo: z.number().int().nullable(),
      /** The day of an old sheet. */
      closedAt: z.union([z.date(), z.string()]).nullable(),
      /** From an old sheet, and not from a run. */
      isHistory: z.boolean(),
    }),
  ),
});

export type AlikePoint = z.output<typeof alikePoint>;
