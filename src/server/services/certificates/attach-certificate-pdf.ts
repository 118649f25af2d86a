import { eq } from 'drizzle-orm';
import { certificates } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { storeFile } from '~/server/files/store-file';
import type { Ctx } from '~/server/write';
import { write } from '~/server/write';

/**
 * Keeps a certificate's PDF byte for byte and asks for the letter that carries it to the buyer. A PDF that is
 * there already stays.
 */
export async function attachCertificatePdf(
  input: { certificateId: number; bytes: Uint8Array },
  ctx: Ctx,
): Promise<{ fileId: number }> {
  return write(ctx, async (w) => {
    const [certificate] = await w.tx
      .select()
      .from(certificates)
      .where(eq(certificates.id, input.certificateId))
      .for('update');
    if (certificate === undefined) throw new DomainError('not_found', 'There is no such certificate.');
    const fileId =
      certificate.fileId ??
      (await storeFile(w, {
        bytes: input.bytes,
        name: `${certificate.number}${certificate.letter}.pdf`,
        mediaType: 'application/pdf',
      }));
    if (certificate.fileId === null) {
      await w.tx.update(certificates).set({ fileId }).where(eq(certificates.id, certificate.id));
    }
    if (certificate.contactId !== null) {
      await w.post({
        kind: 'mail',
        key: `certificate-issued:${certificate.id}`,
        payload: { letter: 'certificate_issued', certificateId: certificate.id },
      });
    }
    await w.record({
      action: 'certificate.print',
      subjects: [
        { type: 'certificate', id: certificate.id },
        { type: 'unit', id: certificate.unitId },
      ],
    });
    return { fileId };
  });
}
