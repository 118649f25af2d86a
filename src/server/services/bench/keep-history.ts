import { and, eq, inArray } from 'drizzle-orm';
import type { HistorySheet } from '~/domain/bench/history';
import { formatDay } from '~/lib/dates';
import { historyColumns } from '~/schemas/history';
import type { HistoryKeeping } from '~/schemas/history';
import { historyReadings, historySheets, units } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readHistoryPaste } from '~/server/queries/bench/read-history';
import { lockModel } from '~/server/services/production/lock-model';
import { actingUserId, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';

const rowsAtOnce = 500;
const namedAtMost = 6;

/**
 * Takes the sheets of a pasted table into the books as history: no run, no verdict and no certificate follows from them.
 * What could not be read stays out.
 *
 * @throws DomainError `not_found`; `refused` where nothing can be taken; `conflict` where sheets of the same serial number
 * and day are here already and nobody has said what becomes of them
 */
export async function keepHistory(
  input: HistoryKeeping,
  ctx: Ctx,
): Promise<{ sheets: number; readings: number; skipped: number; refused: number }> {
  return write(ctx, async (w) => {
    const model = await lockModel(w.tx, input.model);
    const table = await readHistoryPaste(w.tx, input.fileId, historyColumns.parse(input));
    if (table.sheets.length === 0) {
      throw new DomainError(
        'refused',
        `No row could be taken: ${table.refused[0]?.reason ?? 'the table is empty.'}`,
      );
    }
    const { fresh, known } = await tellApart(w, model.id, table.sheets);
    if (known.length > 0 && input.duplicates === 'ask') {
      const named = known.slice(0, namedAtMost).map(nameOf);
      const more = known.length > named.length ? ` and ${known.length - named.length} more` : '';
      const sentence = `Sheets of the same serial number and day are here already: ${named.join(', ')}${more}. Say what becomes of them.`;
      throw new DomainError('conflict', sentence, { duplicates: sentence });
    }
    const taken = input.duplicates === 'keep' ? table.sheets : fresh;
    const readings = await insertSheets(w, model.id, input.note, taken);
    await w.record({
      action: 'history.keep',
      subjects: [{ type: 'model', id: model.id }],
      details: { fileId: input.fileId, sheets: taken.length, readings, refused: table.refused.length },
    });
    const skipped = table.sheets.length - taken.length;
    return { sheets: taken.length, readings, skipped, refused: table.refused.length };
  });
}

const identityOf = ({ serial, testedOn }: Pick<HistorySheet, 'serial' | 'testedOn'>) =>
  `${serial} ${testedOn ?? ''}`;

function nameOf({ serial, testedOn }: HistorySheet): string {
  return testedOn === null ? serial : `${serial} of ${formatDay(testedOn)}`;
}

/** Sheets that are neither in the books nor above in the same table, and the others. */
async function tellApart(w: WriteContext, modelId: number, sheets: readonly HistorySheet[]) {
  const rows = await w.tx
    .select({ serial: historySheets.serial, testedOn: historySheets.testedOn })
    .from(historySheets)
    .where(eq(historySheets.modelId, modelId));
  const seen = new Set(rows.map(identityOf));
  const fresh: HistorySheet[] = [];
  const known: HistorySheet[] = [];
  for (const sheet of sheets) {
    (seen.has(identityOf(sheet)) ? known : fresh).push(sheet);
    seen.add(identityOf(sheet));
  }
  return { fresh, known };
}

async function insertSheets(
  w: WriteContext,
  modelId: number,
  note: string,
  sheets: readonly HistorySheet[],
): Promise<number> {
  const unitIds = await unitIdsOf(w, modelId, sheets);
  let readings = 0;
  for (const sheet of sheets) {
    const [{ insertId: historySheetId }] = await w.tx.insert(historySheets).values({
      ...{ modelId, note, serial: sheet.serial, testedOn: sheet.testedOn },
      unitId: unitIds.get(sheet.serial) ?? null,
      createdAt: w.now,
      createdBy: actingUserId(w),
    });
    await w.tx
      .insert(historyReadings)
      .values(sheet.readings.map((reading) => ({ ...reading, historySheetId })));
    readings += sheet.readings.length;
  }
  return readings;
}

async function unitIdsOf(
  w: WriteContext,
  modelId: number,
  sheets: readonly HistorySheet[],
): Promise<Map<string, number>> {
  const serials = [...new Set(sheets.map(({ serial }) => serial))];
  const ids = new Map<string, number>();
  for (let from = 0; from < serials.length; from += rowsAtOnce) {
    const some = serials.slice(from, from + rowsAtOnce);
    const rows = await w.tx
      .select({ id: units.id, serial: units.serial })
      .from(units)
      .where(and(eq(units.modelId, modelId), inArray(units.serial, some)));
    for (const { id, serial } of rows) ids.set(serial, id);
  }
  return ids;
}
