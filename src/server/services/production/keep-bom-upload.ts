import { readBom } from '~/domain/planning/bom-import/read-bom';
import { DomainError } from '~/server/errors';
import { storeFile } from '~/server/files/store-file';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { lockModel } from './lock-model';

/**
 * Keeps a bill of materials that somebody sent for a model, once it has been understood. What cannot be
 * read is not kept.
 *
 * @throws DomainError `not_found` (the model), `refused` with the reason why it cannot be read
 */
export async function keepBomUpload(
  input: { model: string; bytes: Uint8Array; name: string },
  ctx: Ctx,
): Promise<{ fileId: number; model: string; questions: string[]; partCount: number }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const read = readBom(input.bytes);
    if (!read.ok) {
      throw new DomainError('refused', `“${input.name}” was not taken. ${read.reason}`, {
        file: read.reason,
      });
    }
    const fileId = await storeFile(w, { bytes: input.bytes, name: input.name });
    await w.record({
      action: 'bom.upload',
      subjects: [{ type: 'model', id: model.id }],
      details: { fileId, lines: read.lines.length, questions: read.questions.length },
    });
    const { questions, understood } = read;
    return { fileId, model: model.slug, questions, partCount: understood.partCount };
  });
}
