import { asc, eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { fileChunks, files } from '~/server/db/schema';
import { DomainError } from '~/server/errors';

/**
 * A kept file with its bytes.
 *
 * @throws DomainError `not_found`
 */
export async function readFile(
  reader: Reader,
  fileId: number,
): Promise<{ bytes: Uint8Array<ArrayBuffer>; mediaType: string; name: string; sha256: string }> {
  const [file] = await reader
    .select({
      mediaType: files.mediaType,
      name: files.name,
      sha256: files.sha256,
      sizeBytes: files.sizeBytes,
    })
    .from(files)
    .where(eq(files.id, fileId));
  if (file === undefined) throw new DomainError('not_found', 'There is no such file.');
  const chunks = await reader
    .select({ bytes: fileChunks.bytes })
    .from(fileChunks)
    .where(eq(fileChunks.fileId, fileId))
    .orderBy(asc(fileChunks.position));
  const { sizeBytes, ...rest } = file;
  const bytes = new Uint8Array(sizeBytes);
  let offset = 0;
  for (const chunk of chunks) {
    bytes.set(chunk.bytes, offset);
    offset += chunk.bytes.byteLength;
  }
  if (offset !== sizeBytes) throw new Error(`File ${fileId} has ${offset} of its ${sizeBytes} bytes.`);
  return { bytes, ...rest };
}
