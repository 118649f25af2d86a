import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import { minorDigitsOf } from '~/domain/money/currencies';
import type { worksSchema } from '~/schemas/people';
import { works } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';

/** Changes the works' own data: name, address, zone, currency, and whether a unit's tester may be its builder. */
export async function changeWorks(input: z.output<typeof worksSchema>, ctx: Ctx): Promise<{ changed: true }> {
  if (minorDigitsOf(input.currency) === null) {
    throw new DomainError('invalid', 'This currency is not known here.', {
      currency: 'This currency is not known here; use its three letters of ISO 4217.',
    });
  }
  return write(ctx, async (w) => {
    const [before] = await w.tx.select().from(works).limit(1).for('update');
    if (before === undefined) throw new DomainError('not_found', 'The works has no owner yet.');
    await w.tx
      .update(works)
      .set({ ...input, version: before.version + 1 })
      .where(eq(works.id, before.id));
    const { id, version, ...from } = before;
    await w.record({
      action: 'works.change',
      subjects: [{ type: 'works', id }],
      details: { version, from: { ...from, email: undefined }, to: { ...input, email: undefined } },
    });
    return { changed: true as const };
  });
}
