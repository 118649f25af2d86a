import { asc, desc, eq, inArray } from 'drizzle-orm';
import { cutRows, guessSeparator } from '~/domain/planning/bom-import/read-table';
import { formatValue } from '~/domain/bench/format';
import { readHistory } from '~/domain/bench/history';
import type { HistoryColumn, HistoryTable } from '~/domain/bench/history';
import { pointLabel } from '~/domain/bench/judge-run';
import { compareQuantities, unknownQuantity } from '~/domain/bench/quantities';
import type { Reader } from '~/server/db/client';
import { historyReadings, historySheets, models } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { readFile } from '~/server/queries/files/read-file';
import { listQuantities } from './list-quantities';
import { asBand } from './read-run-sheet';

/** By which a pasted table is told from other files. */
export const historyFileName = 'old-sheets.tsv';

/**
 * What is understood of a pasted table of old sheets.
 *
 * @throws DomainError `not_found` where the file is none, `refused` where it cannot be read at all
 */
export async function readHistoryPaste(
  reader: Reader,
  fileId: number,
  columns: readonly HistoryColumn[] | null,
): Promise<HistoryTable> {
  const { bytes, name } = await readFile(reader, fileId);
  if (name !== historyFileName) throw new DomainError('not_found', 'There is no such table.');
  const read = readHistoryText(new TextDecoder().decode(bytes), columns, await listQuantities(reader));
  if (!read.ok) throw new DomainError('refused', read.reason);
  return read;
}

/** As {@link readHistoryPaste}, of a text. */
export function readHistoryText(
  text: string,
  columns: readonly HistoryColumn[] | null,
  quantities: Awaited<ReturnType<typeof listQuantities>>,
): ReturnType<typeof readHistory> {
  const cut = cutRows(text, guessSeparator(text) ?? '\t');
  if (!cut.ok) return cut;
  return readHistory(
    cut.rows.map(({ cells }) => cells),
    columns,
    quantities,
  );
}

/** An old sheet as it is shown: never as a run. */
export interface ShownSheet {
  id: number;
  serial: string;
  modelName: string;
  testedOn: string | null;
  note: string;
  /** `40 m, power` with `4.80 W`, in the order of testing. */
  readings: { label: string; value: string; entered: string }[];
}

/** Old sheets, the newest first: of a unit by its serial number, or the last ones that were kept. */
export async function listHistorySheets(
  reader: Reader,
  { serial, limit }: { serial?: string; limit: number },
): Promise<ShownSheet[]> {
  const sheets = await reader
    .select({
      id: historySheets.id,
      serial: historySheets.serial,
      modelName: models.name,
      testedOn: historySheets.testedOn,
      note: historySheets.note,
    })
    .from(historySheets)
    .innerJoin(models, eq(models.id, historySheets.modelId))
    .where(serial === undefined ? undefined : eq(historySheets.serial, serial))
    .orderBy(desc(historySheets.id))
    .limit(limit);
  if (sheets.length === 0) return [];
  const ids = sheets.map(({ id }) => id);
  const [rows, quantities] = await Promise.all([
    reader
      .select()
      .from(historyReadings)
      .where(inArray(historyReadings.historySheetId, ids))
      .orderBy(asc(historyReadings.id)),
    listQuantities(reader),
  ]);
  return sheets.map((sheet) => ({
    ...sheet,
    readings: rows
      .filter(({ historySheetId }) => historySheetId === sheet.id)
      .map(({ quantityKey, band, value, enteredText, enteredUnit }) => {
        const quantity = quantities.get(quantityKey) ?? unknownQuantity(quantityKey);
        return {
          quantity,
          label: pointLabel({ quantity, band: asBand(band) }),
          value: formatValue(value, quantity),
          entered: `${enteredText} (${enteredUnit})`,
        };
      })
      .sort((a, b) => compareQuantities(a.quantity, b.quantity))
      .map(({ label, value, entered }) => ({ label, value, entered })),
  }));
}

/** So many values of old sheets are looked through, the newest first. */
const mostHistoryValues = 2000;

/** What old sheets of a model say, for a plot that shows them apart from what was measured here: the newest first. */
export async function listHistoryValues(
  reader: Reader,
  modelId: number,
): Promise<
  { quantityKey: string; band: string | null; serial: string; testedOn: string | null; value: number }[]
> {
  return reader
    .select({
      quantityKey: historyReadings.quantityKey,
      band: historyReadings.band,
      serial: historySheets.serial,
      testedOn: historySheets.testedOn,
      value: historyReadings.value,
    })
    .from(historyReadings)
    .innerJoin(historySheets, eq(historySheets.id, historyReadings.historySheetId))
    .where(eq(historySheets.modelId, modelId))
    .orderBy(desc(historySheets.testedOn), desc(historyReadings.id))
    .limit(mostHistoryValues);
}
