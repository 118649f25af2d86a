import { eq } from 'drizzle-orm';
import { alias } from 'drizzle-orm/mysql-core';
import type { Reader } from '~/server/db/client';
import { certificates, contacts, models, orderLines, orders, units } from '~/server/db/schema';

const replaced = alias(certificates, 'replaced');

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
      reason: certificates.reason,
      replacedNumber: replaced.number,
      replacedLetter: replaced.letter,
    })
    .from(certificates)
    .innerJoin(units, eq(units.id, certificates.unitId))
    .innerJoin(models, eq(models.id, units.modelId))
    .innerJoin(contacts, eq(contacts.id, certificates.contactId))
    .innerJoin(orderLines, eq(orderLines.id, units.orderLineId))
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(replaced, eq(replaced.id, certificates.replacesId))
    .where(eq(certificates.id, certificateId));
  if (row === undefined || row.erasedAt !== null) return null;
  const { reason, replacedNumber, replacedLetter, ...facts } = row;
  return {
    ...facts,
    replaces: replacedNumber === null ? null : { number: `${replacedNumber}${replacedLetter}`, reason },
  };
}
