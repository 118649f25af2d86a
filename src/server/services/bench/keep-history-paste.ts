import { storeFile } from '~/server/files/store-file';
import { DomainError } from '~/server/errors';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { historyFileName, readHistoryText } from '~/server/queries/bench/read-history';
import { lockModel } from '~/server/services/production/lock-model';
import { write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Keeps a pasted table of old test sheets, so that what was understood of it can be looked at and corrected.
 *
 * @throws DomainError `not_found` (the model), `refused` where it is no table of sheets
 */
export async function keepHistoryPaste(
  input: { model: string; text: string },
  ctx: Ctx,
): Promise<{ fileId: number; model: string }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const read = readHistoryText(input.text, null, await listQuantities(w.tx));
    if (!read.ok) throw new DomainError('refused', read.reason, { text: read.reason });
    const bytes = new TextEncoder().encode(input.text);
    const fileId = await storeFile(w, { bytes, name: historyFileName });
    await w.record({
      action: 'history.paste',
      subjects: [{ type: 'model', id: model.id }],
      details: { fileId, sheets: read.sheets.length, refused: read.refused.length },
    });
    return { fileId, model: model.slug };
  });
}
