import { parseCode } from '~/domain/certificates/code';
import type { StaffRole } from '~/domain/people/roles';
import { tokenHash } from '~/server/auth/tokens';
import type { Reader } from '~/server/db/client';
import { DomainError } from '~/server/errors';
import { readFile } from '~/server/queries/files/read-file';
import { readCertificateOwner } from '~/server/queries/certificates/read-certificate-owner';
import { passes, staff } from '~/server/rules';

interface Asked {
  code: string;
  /** The token of a buyer's order link. */
  orderLink: string | undefined;
  person: { id: number; roles: StaffRole[] } | null;
}

const worksRule = staff('builder', 'tester', 'shipper');

/**
 * The PDF that bears the buyer's call sign: for people of the works, and for its buyer.
 *
 * @throws DomainError `not_found` for everybody else, who may not know of it
 */
export async function readCertificatePdf(reader: Reader, { code, orderLink, person }: Asked) {
  const parsed = parseCode(code);
  const found = parsed.ok ? await readCertificateOwner(reader, parsed.code) : null;
  const isBuyer =
    found !== null &&
    ((person !== null && found.buyerUserId === person.id) ||
      (orderLink !== undefined && found.orderLinkHash === tokenHash(orderLink)));
  if (found === null || !(isBuyer || passes(worksRule, person) === 'yes')) {
    throw new DomainError('not_found', 'There is no such certificate for you.');
  }
  if (found.fileId === null) {
    throw new DomainError('conflict', 'The certificate is still being printed; ask again in a few seconds.');
  }
  const { bytes, mediaType, name } = await readFile(reader, found.fileId);
  return { bytes, mediaType, fileName: name, inline: true };
}
