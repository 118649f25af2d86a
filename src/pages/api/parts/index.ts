import { z } from 'zod';
import { maySeeStockValue } from '~/domain/people/may-see';
import { paths } from '~/lib/paths';
import { newPart, partsSearch } from '~/schemas/stores-parts';
import { door } from '~/server/door';
import { listParts } from '~/server/queries/stores/list-parts';
import { everyStaff, staff } from '~/server/rules';
import { createPart } from '~/server/services/stores/create-part';

const row = z.object({
  number: z.string(),
  description: z.string(),
  value: z.string(),
  footprint: z.string(),
  unit: z.string(),
  trace: z.string(),
  usable: z.number(),
  onHand: z.number(),
  valueMinor: z.number().nullable(),
  usedIn: z.array(z.string()),
});

export const GET = door({
  rule: everyStaff,
  summary: 'Parts with what is on hand, a page of them; q searches number, description and value',
  query: partsSearch,
  output: z.object({ rows: z.array(row), total: z.number().int() }),
  run: async ({ query, ctx, person }) => {
    const found = await listParts(ctx.db, query);
    if (maySeeStockValue(person?.roles ?? [])) return found;
    return { ...found, rows: found.rows.map((one) => ({ ...one, valueMinor: null })) };
  },
});

export const POST = door({
  rule: staff('builder'),
  summary: 'Enter a part in the books',
  input: newPart,
  output: z.object({ partId: z.number().int(), number: z.string() }),
  said: ({ number }) => `${number} is in the books.`,
  next: ({ number }) => paths.part(number),
  run: ({ input, ctx }) => createPart(input, ctx),
});
