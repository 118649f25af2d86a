import { z } from 'zod';
import { formatDayOf } from '~/lib/dates';
import { paths } from '~/lib/paths';
import { linkToken } from '~/server/auth/tokens';
import { env } from '~/server/env';
import { readFile } from '~/server/queries/files/read-file';
import { certificateIssuedLetter } from '~/server/mail/certificate-issued';
import { readCertificateLetter } from '~/server/queries/certificates/read-certificate-letter';
import { getWorks } from '~/server/queries/office/get-works';
import { fullUrl, readSender } from './letter';
import type { LetterWriter } from './letter';

const payloadSchema = z.object({ certificateId: z.number().int() });

/** The letter that brings a buyer their certificate as PDF. */
export const writeCertificateIssued: LetterWriter = async (reader, payload) => {
  const facts = await readCertificateLetter(reader, payloadSchema.parse(payload).certificateId);
  if (facts === null || facts.fileId === null) return null;
  const [sender, { timeZone }, file] = await Promise.all([
    readSender(reader),
    getWorks(reader),
    readFile(reader, facts.fileId),
  ]);
  const certificateNumber = `${facts.number}${facts.letter}`;
  const letter = certificateIssuedLetter({
    sender,
    orderNumber: String(facts.orderNumber),
    serial: facts.serial,
    modelName: facts.modelName,
    certificateNumber,
    issuedOn: formatDayOf(facts.issuedAt, timeZone),
    checkUrl: fullUrl(paths.certificateByCode(facts.code)),
    replaces: facts.replaces,
    orderUrl: fullUrl(paths.orderByLink(linkToken(env().secret, 'order', facts.orderId))),
  });
  return {
    ...letter,
    to: facts.email,
    attachments: [
      { filename: `${certificateNumber}.pdf`, contentType: 'application/pdf', content: file.bytes },
    ],
  };
};
