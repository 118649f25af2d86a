import { readMeasures } from '~/domain/bench/measured';
import type { MeasureText } from '~/domain/bench/measured';
import type { InstrumentSpec } from '~/domain/bench/types';
import { MAX_CALIBRATION_BYTES } from '~/schemas/bench-equipment';
import { DomainError } from '~/server/errors';
import { mediaTypeOf } from '~/server/files/media-type';
import { storeFile } from '~/server/files/store-file';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import type { WriteContext } from '~/server/write';

/** A file that came with a form. */
export interface SentFile {
  bytes: Uint8Array;
  name: string;
}

/** An instrument as it is entered; what its quantities are good for as text where a form was filled in. */
export interface InstrumentEntry {
  name: string;
  spec: InstrumentSpec;
  measures?: Readonly<Record<string, MeasureText>>;
  certificateFile?: SentFile | undefined;
}

/**
 * The specification with what was typed of each quantity.
 *
 * @throws DomainError `invalid`, with what is wrong by field
 */
export async function completeSpec(
  w: WriteContext,
  { spec, measures }: Pick<InstrumentEntry, 'spec' | 'measures'>,
): Promise<InstrumentSpec> {
  if (measures === undefined) return spec;
  const { quantities, problems } = readMeasures(measures, await listQuantities(w.tx));
  const [first] = Object.values(problems);
  if (first !== undefined) {
    throw new DomainError('invalid', `What was sent cannot be used: ${first}`, problems);
  }
  return { ...spec, quantities };
}

const certificateTypes: readonly string[] = ['application/pdf', 'image/png', 'image/jpeg'];

/**
 * Keeps the file of a calibration certificate and gives its id.
 *
 * @throws DomainError `refused` for a type that is no certificate, `too_large`
 */
export async function keepCertificate(w: WriteContext, file: SentFile): Promise<number> {
  if (file.bytes.byteLength > MAX_CALIBRATION_BYTES) {
    const sentence = `“${file.name}” is larger than 8 MB: scan it in fewer dots.`;
    throw new DomainError('too_large', sentence, { certificateFile: sentence });
  }
  if (!certificateTypes.includes(mediaTypeOf(file.bytes))) {
    const sentence = `“${file.name}” is no PDF, PNG or JPEG by its content: send the certificate as one of them.`;
    throw new DomainError('refused', sentence, { certificateFile: sentence });
  }
  return storeFile(w, file);
}
