import { newPart } from '~/schemas/stores-parts';
import type { BomAcceptance } from '~/schemas/production-models';
import { DomainError } from '~/server/errors';
import { readBomUpload } from '~/server/queries/production/read-bom-upload';
import type { PartLine } from '~/domain/planning/bom-import/match-parts';
import { createPart } from '~/server/services/stores/create-part';
import { write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { createBomRevision } from './create-bom-revision';
import type { DraftLine } from './create-bom-revision';

/**
 * Makes a draft BOM revision of a file that was read before. Each line goes to the part that was chosen for
 * it; parts that are not in the books yet are entered, traced by batch.
 *
 * @throws DomainError `not_found`, `refused` where the file's questions were not confirmed as read, where a
 * part number cannot be used, or the choices are not as many as the lines
 */
export async function acceptBomUpload(
  input: BomAcceptance & { model: string },
  ctx: Ctx,
): Promise<{ bomRevisionId: number; letter: string; lines: number; partsEntered: number }> {
  return write(ctx, async (w) => {
    const { name, lines, questions, partNumbers } = await readBomUpload(w.tx, input.fileId);
    if (questions.length > 0 && !input.questionsRead) {
      const sentence =
        'The file raises questions. Read them, and confirm that the lines may stand as they are.';
      throw new DomainError('refused', sentence, { questionsRead: sentence });
    }
    const chosen = input.parts ?? lines.map((line) => line.match?.number ?? line.proposal);
    if (chosen.length !== lines.length) {
      throw new DomainError(
        'refused',
        `The file has ${lines.length} lines, but ${chosen.length} parts were chosen.`,
      );
    }
    const entered = await enterMissing(w, lines, chosen, new Set(partNumbers));
    const drafted = await createBomRevision(
      {
        model: input.model,
        note: input.note === '' ? `Read from ${name}` : input.note,
        lines: draftLines(lines, chosen),
      },
      w,
    );
    await w.record({
      action: 'bom.accept_upload',
      subjects: [{ type: 'bom_revision', id: drafted.bomRevisionId }],
      details: {
        fileId: input.fileId,
        letter: drafted.letter,
        partsEntered: entered,
        questions: questions.length,
      },
    });
    const count = chosen.filter((number) => number !== '').length;
    return { ...drafted, lines: count, partsEntered: entered.length };
  });
}

async function enterMissing(
  w: WriteContext,
  lines: readonly PartLine[],
  chosen: readonly string[],
  known: Set<string>,
): Promise<string[]> {
  const entered: string[] = [];
  for (const [index, line] of lines.entries()) {
    const number = chosen[index] ?? '';
    if (number === '' || known.has(number)) continue;
    const part = newPart.safeParse({
      number,
      description: (line.description || line.value || line.footprint || number).slice(0, 200),
      value: line.value.slice(0, 60),
      footprint: line.footprint.slice(0, 80),
      trace: 'batch',
    });
    if (!part.success) {
      const why = part.error.issues[0]?.message ?? 'It cannot be used.';
      throw new DomainError(
        'refused',
        `Line ${line.fileLine}: “${number}” cannot be a part's number. ${why}`,
      );
    }
    await createPart(part.data, w);
    known.add(number);
    entered.push(number);
  }
  return entered;
}

/** Lines that were given the same part become one. */
function draftLines(lines: readonly PartLine[], chosen: readonly string[]): DraftLine[] {
  const drafts = new Map<string, DraftLine>();
  for (const [index, line] of lines.entries()) {
    const partNumber = chosen[index] ?? '';
    if (partNumber === '') continue;
    const known = drafts.get(partNumber);
    drafts.set(partNumber, {
      partNumber,
      quantity: (known?.quantity ?? 0) + line.quantity,
      designators: [...(known?.designators ?? []), ...line.designators],
    });
  }
  return [...drafts.values()];
}
