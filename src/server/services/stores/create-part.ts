import type { NewPart } from '~/schemas/stores-parts';
import { parts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Enters a part in the books under its own number.
 *
 * @throws DomainError `conflict` where the number is taken
 */
export async function createPart(input: NewPart, ctx: Ctx): Promise<{ partId: number; number: string }> {
  return write(ctx, async (w) => {
    const values = { ...input, createdAt: w.now };
    const [inserted] = await w.tx
      .insert(parts)
      .values(values)
      .catch((error: unknown) => {
        if (databaseErrno(error) !== 1062) throw error;
        const sentence = `There is a part ${input.number} already.`;
        throw new DomainError('conflict', sentence, { number: sentence });
      });
    const partId = inserted.insertId;
    await w.record({
      action: 'part.create',
      subjects: [{ type: 'part', id: partId }],
      details: { ...input },
    });
    return { partId, number: input.number };
  });
}
