import { createHash } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { fileChunks, files } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingUserId } from '~/server/write';
import type { WriteContext } from '~/server/write';
import { mediaTypeOf } from './media-type';

const chunkBytes = 1024 * 1024;

/**
 * Keeps a file within the caller's transaction and gives its id. The same bytes are kept once, under the
 * name that they came with first. The type is told by content; a text may be named more closely
 * (`text/csv`).
 *
 * @throws DomainError `refused` where the content is not of the type that was asked for.
 */
export async function storeFile(
  w: Pick<WriteContext, 'tx' | 'now' | 'actor'>,
  file: { bytes: Uint8Array; name: string; mediaType?: string },
): Promise<number> {
  const sha256 = createHash('sha256').update(file.bytes).digest('hex');
  const mediaType = checkedType(file);
  const [inserted] = await w.tx
    .insert(files)
    .ignore()
    .values({
      sha256,
      sizeBytes: file.bytes.byteLength,
      mediaType,
      name: file.name.slice(0, 255),
      createdAt: w.now,
      createdBy: actingUserId(w),
    });
  if (inserted.affectedRows === 0) return idOf(w.tx, sha256);
  const fileId = inserted.insertId;
  for (let position = 0; position * chunkBytes < file.bytes.byteLength; position += 1) {
    const from = position * chunkBytes;
    const bytes = Buffer.from(file.bytes.subarray(from, from + chunkBytes));
    await w.tx.insert(fileChunks).values({ fileId, position, bytes });
  }
  return fileId;
}

function checkedType({
  bytes,
  mediaType,
  name,
}: {
  bytes: Uint8Array;
  mediaType?: string;
  name: string;
}): string {
  const told = mediaTypeOf(bytes);
  if (mediaType === undefined || mediaType === told) return told;
  if (told === 'text/plain' && mediaType.startsWith('text/')) return mediaType;
  throw new DomainError('refused', `“${name}” is not what it says it is: by its content it is ${told}.`);
}

async function idOf(reader: Reader, sha256: string): Promise<number> {
  const [row] = await reader.select({ id: files.id }).from(files).where(eq(files.sha256, sha256));
  if (row === undefined) throw new Error('A file that is there already was not found.');
  return row.id;
}
