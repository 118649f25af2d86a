import { eq, inArray } from 'drizzle-orm';
import { compareLetters, nextLetter } from '~/lib/revision-letters';
import type { Tx } from '~/server/db/client';
import { bomLines, bomRevisions, parts } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockModel } from './lock-model';

export interface DraftLine {
  partNumber: string;
  quantity: number;
  designators: string[];
  condition?: string | null;
  scrapPercent?: number;
}

/**
 * Drafts the next BOM revision of a model; nothing is built to it until it is released.
 *
 * @throws DomainError `not_found` (model, or parts, each named)
 */
export async function createBomRevision(
  input: { model: string; note: string; lines: readonly DraftLine[] },
  ctx: Ctx,
): Promise<{ bomRevisionId: number; letter: string }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const earlier = await w.tx
      .select({ id: bomRevisions.id, letter: bomRevisions.letter, state: bomRevisions.state })
      .from(bomRevisions)
      .where(eq(bomRevisions.modelId, model.id));
    earlier.sort((a, b) => compareLetters(a.letter, b.letter));
    const letter = nextLetter(earlier.at(-1)?.letter ?? null);
    const partIds = await partIdsOf(w.tx, input.lines);
    const [revision] = await w.tx.insert(bomRevisions).values({
      modelId: model.id,
      letter,
      state: 'draft',
      note: input.note,
      replacesId: earlier.findLast(({ state }) => state === 'released')?.id ?? null,
      createdAt: w.now,
    });
    const bomRevisionId = revision.insertId;
    if (input.lines.length > 0) {
      await w.tx.insert(bomLines).values(
        input.lines.map((line, index) => ({
          bomRevisionId,
          lineNo: index + 1,
          partId: partIds.get(line.partNumber) ?? 0,
          quantity: line.quantity,
          designators: line.designators,
          condition: line.condition ?? null,
          scrapPercent: line.scrapPercent ?? 0,
        })),
      );
    }
    await w.record({
      action: 'bom.draft',
      subjects: [
        { type: 'model', id: model.id },
        { type: 'bom_revision', id: bomRevisionId },
      ],
      details: { letter, lines: input.lines.length, note: input.note },
    });
    return { bomRevisionId, letter };
  });
}

async function partIdsOf(tx: Tx, lines: readonly DraftLine[]): Promise<Map<string, number>> {
  const numbers = [...new Set(lines.map(({ partNumber }) => partNumber))];
  if (numbers.length === 0) return new Map();
  const rows = await tx
    .select({ id: parts.id, number: parts.number })
    .from(parts)
    .where(inArray(parts.number, numbers));
  const ids = new Map(rows.map(({ id, number }) => [number, id]));
  const unknown = numbers.filter((number) => !ids.has(number));
  if (unknown.length > 0) {
    throw new DomainError(
      'not_found',
      `These parts are not in the books: ${unknown.slice(0, 10).join(', ')}.`,
    );
  }
  return ids;
}
