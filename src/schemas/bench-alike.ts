import { z } from 'zod';

/** The last values that closed runs of the same model kept for a point: the newest first. */
export const alikePoint = z.object({
  testPointId: z.number().int(),
  quantityKey: z.string(),
  band: z.string().nullable(),
  values: z.array(
    z.object({
      /** At the unit, in the unit of the quantity. */
      value: z.number(),
      verdict: z.enum(['pass', 'too_close', 'fail', 'not_run']),
      serial: z.string(),
      runNo: z.number().int(),
      closedAt: z.union([z.date(), z.string()]).nullable(),
    }),
  ),
});

export type AlikePoint = z.output<typeof alikePoint>;
