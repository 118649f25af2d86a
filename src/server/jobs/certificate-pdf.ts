import { z } from 'zod';
import { makeCertificatePdf } from '~/server/documents/certificate-pdf';
import { attachCertificatePdf } from '~/server/services/certificates/attach-certificate-pdf';
import { NeverPossible } from './job';
import type { JobCall } from './job';

const payloadSchema = z.object({ certificateId: z.number().int() });

/** Makes an issued certificate's PDF and keeps it. */
export async function certificatePdf({ db, now, payload }: JobCall): Promise<void> {
  const { certificateId } = payloadSchema.parse(payload);
  const bytes = await makeCertificatePdf(db, certificateId);
  if (bytes === null) throw new NeverPossible(`There is no certificate ${certificateId}.`);
  await attachCertificatePdf({ certificateId, bytes }, { db, now, actor: { kind: 'system' } });
}
