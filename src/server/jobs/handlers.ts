import { certificatePdf } from './certificate-pdf';
import type { JobCall } from './job';
import { mailLetter } from './mail-letter';
import { sendRefund } from './send-refund';

/** What is done with each kind of outbox row. */
export const handlers: Readonly<Record<string, (call: JobCall) => Promise<void>>> = {
  mail: mailLetter,
  certificate_pdf: certificatePdf,
  refund: sendRefund,
};
