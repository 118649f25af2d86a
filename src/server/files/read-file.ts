import { asc, eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { fileChunks, files } from '~/server/db/schema';
import { DomainError } from '~/server/errors';

/**
 * A kept file, whole, as it was stored.
 *
 * @throws DomainError `not_found`
 */
export async function readFile(reader: Reader, fileId: number) {
  const [file] = await reader.select().from(files).where(eq(files.id, fileId));
  if (file === undefined) throw new DomainError('not_found', 'There is no such file.');
  const chunks = await reader
    .select({ bytes: fileChunks.bytes })
    .from(fileChunks)
    .where(eq(fileChunks.fileId, fileId))
    .orderBy(asc(fileChunks.position));
  const bytes = new Uint8Array(file.sizeBytes);
  let offset = 0;
  for (const chunk of chunks) {
    bytes.set(chunk.bytes, offset);
    offset += chunk.bytes.byteLength;
  }
  return { bytes, mediaType: file.mediaType, name: file.name, sha256: file.sha256 };
}
