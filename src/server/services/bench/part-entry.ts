import type { FreqUnit } from '~/domain/bench/loss-rows';
import { readLossFile, readLossTable } from '~/domain/bench/loss-table';
import type { PathPart } from '~/domain/bench/types';
import { MAX_LOSS_BYTES } from '~/schemas/bench-equipment';
import { DomainError } from '~/server/errors';
import { storeFile } from '~/server/files/store-file';
import type { WriteContext } from '~/server/write';
import type { SentFile } from './instrument-entry';

/** A path part as it is entered: its loss as typed or as a file, which takes the place of what was typed. */
export interface PartEntry extends Pick<
  PathPart,
  'name' | 'uncertaintyDb' | 'k' | 'flatnessDb' | 'ratingW' | 'vswr'
> {
  lossTable: string;
  lossFile?: SentFile | undefined;
  /** Of frequencies, where the table does not say it. */
  freqUnit?: FreqUnit | undefined;
}

/** A specification as stored, the file it was read from, and what has to be known about that. */
interface ReadPart {
  spec: PathPart;
  fileId: number | null;
  note: string;
}

function refuse(sentence: string, field: 'lossFile' | 'lossTable'): DomainError {
  return new DomainError('refused', sentence, { [field]: sentence });
}

/**
 * Reads what was entered of a part, and keeps its file.
 *
 * @param before its present revision: while the table is the same, so is the file it was read from
 * @throws DomainError `refused`, beside the table or the file; `too_large`
 */
export async function readPart(
  w: WriteContext,
  number: string,
  entry: PartEntry,
  before?: { spec: PathPart; fileId: number | null },
): Promise<ReadPart> {
  const { lossTable, lossFile, freqUnit, ...figures } = entry;
  const rest = { ...figures, partNumber: number };
  if (lossFile === undefined) {
    const typed = typedRows(entry);
    const isSame = before !== undefined && JSON.stringify(before.spec.loss) === JSON.stringify(typed);
    return { spec: { ...rest, loss: typed }, fileId: isSame ? before.fileId : null, note: '' };
  }
  if (lossFile.bytes.byteLength > MAX_LOSS_BYTES) {
    const sentence = `“${lossFile.name}” is larger than 1 MB: export fewer points.`;
    throw new DomainError('too_large', sentence, { lossFile: sentence });
  }
  const read = readLossFile(lossFile.bytes, lossFile.name, freqUnit);
  if (!read.ok) throw refuse(`“${lossFile.name}”: ${read.reason}`, 'lossFile');
  const { rows, vswr, note } = read;
  if (rows.length > 0) {
    const spec = { ...rest, loss: rows, vswr: figures.vswr ?? vswr };
    return { spec, fileId: await storeFile(w, lossFile), note };
  }
  // One port: the standing wave ratio is what was sent, and the loss is what was typed.
  if (lossTable.trim() === '') throw refuse(note, 'lossTable');
  const spec = { ...rest, loss: typedRows(entry), vswr: vswr ?? figures.vswr };
  return { spec, fileId: await storeFile(w, lossFile), note };
}

function typedRows({ lossTable, freqUnit }: PartEntry): [number, number][] {
  const read = readLossTable(lossTable, freqUnit);
  if (read.ok) return read.rows;
  throw refuse(read.reason, 'lossTable');
}
