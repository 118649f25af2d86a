import { describe, expect, it } from 'vitest';
import { fileChunks, files } from '~/server/db/schema';
import { storeFile } from '~/server/files/store-file';
import { readFile } from '~/server/queries/files/read-file';
import { write } from '~/server/write';
import { seedBuilder } from '../../factories/stores';
import { testDatabase } from '../../setup/database';

const database = testDatabase();

async function keep(file: { bytes: Uint8Array; name: string; mediaType?: string }): Promise<number> {
  const ctx = { db: database.db, now: new Date('2027-03-01T09:00:00Z'), actor: { kind: 'system' as const } };
  return write(ctx, async (w) => {
    await w.record({ action: 'test.keep_file', subjects: [] });
    return storeFile(w, file);
  });
}

describe('files', () => {
  it('come back byte for byte, in pieces of 1 MiB', async () => {
    const bytes = Uint8Array.from({ length: 2_500_000 }, (_, index) => (index * 31) % 251);
    const id = await keep({ bytes, name: 'sweep.bin' });
    expect(await database.db.$count(fileChunks)).toBe(3);
    const read = await readFile(database.db, id);
    expect(Buffer.compare(Buffer.from(read.bytes), Buffer.from(bytes))).toBe(0);
    expect(read.mediaType).toBe('application/octet-stream');
  });

  it('are kept once, also when they arrive twice at once', async () => {
    await seedBuilder(database.db);
    const bytes = new TextEncoder().encode('Ref,Value\nR1,4k7\n');
    const ids = await Promise.all(
      [1, 2, 3, 4].map((n) => keep({ bytes, name: `bom-${n}.csv`, mediaType: 'text/csv' })),
    );
    expect(new Set(ids).size).toBe(1);
    expect(await database.db.$count(files)).toBe(1);
  });

  it.each([
    { bytes: [0x25, 0x50, 0x44, 0x46, 0x2d, 0x31], mediaType: 'application/pdf' },
    { bytes: [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0], mediaType: 'image/png' },
    { bytes: [0xff, 0xd8, 0xff, 0xe0], mediaType: 'image/jpeg' },
    { bytes: [0xff, 0xfe, 0x52, 0x00], mediaType: 'text/plain' },
    { bytes: [0x52, 0x31, 0x0a], mediaType: 'text/plain' },
  ])('are told by content: $mediaType', async ({ bytes, mediaType }) => {
    const id = await keep({ bytes: Uint8Array.from(bytes), name: 'any.txt' });
    expect((await readFile(database.db, id)).mediaType).toBe(mediaType);
  });

  it('are refused where they are not what they say', async () => {
    const bytes = new TextEncoder().encode('not a PDF');
    await expect(keep({ bytes, name: 'a.pdf', mediaType: 'application/pdf' })).rejects.toMatchObject({
      code: 'refused',
    });
    expect(await database.db.$count(files)).toBe(0);
  });
});
