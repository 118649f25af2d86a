import { writeBalanceDue } from './balance-due-letter';
import { writeCertificateIssued } from './certificate-letter';
import type { LetterWriter } from './letter';
import { writeInvitation, writeSignInLink } from './link-letters';
import { writeOrderReceived, writeOrderWithoutPlace } from './order-received';
import { writeShipped } from './shipped-letter';

/** Every letter that an outbox row can ask for, by its name there. */
export const letters: Readonly<Record<string, LetterWriter>> = {
  balance_due: writeBalanceDue,
  certificate_issued: writeCertificateIssued,
  invitation: writeInvitation,
  order_received: writeOrderReceived,
  order_without_place: writeOrderWithoutPlace,
  shipped: writeShipped,
  sign_in_link: writeSignInLink,
};
