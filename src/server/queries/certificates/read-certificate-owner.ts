import { eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { certificates, orders } from '~/server/db/schema';

/** Whose a certificate is: the order for whose contact it was issued. */
export async function readCertificateOwner(reader: Reader, code: string) {
  const [row] = await reader
    .select({
      fileId: certificates.fileId,
      buyerUserId: orders.buyerUserId,
      orderLinkHash: orders.linkHash,
    })
    .from(certificates)
    .leftJoin(orders, eq(orders.contactId, certificates.contactId))
    .where(eq(certificates.code, code));
  return row ?? null;
}
