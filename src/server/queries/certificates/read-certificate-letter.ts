import { eq } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { certificates, contacts, models, orderLines, orders, units } from '~/server/db/schema';

/** What the letter that carries a certificate needs; null where its buyer has been erased. */
export async function readCertificateLetter(reader: Reader, certificateId: number) {
  const [row] = await reader
    .select({
      number: certificates.number,
      letter: certificates.letter,
      code: certificates.code,
      fileId: certificates.fileId,
      issuedAt: certificates.issuedAt,
      serial: units.serial,
      modelName: models.name,
      email: contacts.email,
      erasedAt: contacts.erasedAt,
      orderId: orders.id,
      orderNumber: orders.number,
    })
    .from(certificates)
    .innerJoin(units, eq(units.id, certificates.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(contacts, eq(contacts.id, certificates.contactId))
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .where(eq(certificates.id, certificateId));
  return row === undefined || row.erasedAt !== null ? null : row;
}
