import { z } from 'zod';
import type { HistoryColumn } from '~/domain/bench/history';
import { formList } from './form-list';

const model = z.string({ required_error: 'Choose the model.' }).min(1, 'Choose the model.').max(60);

/** A table as it was copied out of a spreadsheet. */
export const historyPaste = z.object({
  model,
  text: z
    .string({ required_error: 'Paste the table.' })
    .min(1, 'Paste the table.')
    .max(2_000_000, 'Paste less at once: at most 2 million characters.'),
});

const cell = z.string().max(60);
const list = z.preprocess(formList, z.array(cell).max(60));

/** What each column holds, as somebody has corrected it; a list a field, in the order of the columns. */
export const historyColumns = z
  .object({ meaning: list, band: list, unit: list })
  .transform(({ meaning, band, unit }): HistoryColumn[] | null =>
    meaning.length === 0
      ? null
      : meaning.map((each, index) => ({
          meaning: each,
          band: band[index] ?? '',
          unit: (unit[index] ?? '').trim(),
        })),
  );

/** `?file=…`: the paste whose reading is shown, with the columns as they were corrected. */
export const shownHistory = z
  .object({ file: z.coerce.number().int().positive().optional().catch(undefined) })
  .passthrough();

export const historyKeeping = z
  .object({
    model,
    fileId: z.coerce.number().int().positive(),
    /** What becomes of a sheet that is kept already: of the same serial number and day. */
    duplicates: z.enum(['ask', 'skip', 'keep'], {
      message: 'Say what becomes of sheets that are here already.',
    }),
    note: z.string().trim().max(300, 'At most 300 characters.').default(''),
  })
  .and(z.object({ meaning: list, band: list, unit: list }));

export type HistoryKeeping = z.output<typeof historyKeeping>;
