import { z } from 'zod';

/** `?before=`: the id of the last row of the page before. Nonsense in an address starts at the top. */
export const beforeSchema = z.object({
  before: z.coerce.number().int().positive().optional().catch(undefined),
});
