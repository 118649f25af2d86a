import { setLetter, type Letter, type LetterSender } from './layout';

interface CertificateIssued {
  sender: LetterSender;
  orderNumber: string;
  serial: string;
  modelName: string;
  certificateNumber: string;
  /** As people read it, for example `9 March 2027`. */
  issuedOn: string;
  /** The public page on which anyone can check the certificate. */
  checkUrl: string;
  orderUrl: string;
  /** On an amendment, the certificate that it replaces, and why. */
  replaces: { number: string; reason: string } | null;
}

/** Goes out with the certificate as PDF. */
export function certificateIssuedLetter(certificate: CertificateIssued): Letter {
  const { serial, certificateNumber, issuedOn, replaces } = certificate;
  if (replaces !== null) return amendedLetter(certificate, replaces);
  return setLetter({
    sender: certificate.sender,
    subject: `Test certificate ${certificateNumber} for ${serial}`,
    heading: 'Your rig passed its final test',
    blocks: [
      { kind: 'tag', serial, modelName: certificate.modelName },
      {
        kind: 'paragraph',
        text: 'The certificate is attached: what we measured, how, and how sure we are of it. Keep it with the rig.',
      },
      {
        kind: 'facts',
        rows: [
          ['Certificate', certificateNumber],
          ['Issued', issuedOn],
          ['Order', certificate.orderNumber],
        ],
      },
      { kind: 'button', words: 'See your order', url: certificate.orderUrl },
      { kind: 'link', words: 'Check this certificate', url: certificate.checkUrl },
    ],
  });
}

function amendedLetter(
  { sender, serial, modelName, certificateNumber, issuedOn, ...certificate }: CertificateIssued,
  replaces: { number: string; reason: string },
): Letter {
  return setLetter({
    sender,
    subject: `Corrected test certificate ${certificateNumber} for ${serial}`,
    heading: 'We corrected your certificate',
    blocks: [
      { kind: 'tag', serial, modelName },
      {
        kind: 'paragraph',
        text: `The new one is attached and takes the place of ${replaces.number}. What we measured stays as it was; a fact around it was wrong.`,
      },
      {
        kind: 'facts',
        rows: [
          ['Certificate', certificateNumber],
          ['Replaces', replaces.number],
          ['Why', replaces.reason],
          ['Issued', issuedOn],
          ['Order', certificate.orderNumber],
        ],
      },
      { kind: 'button', words: 'See your order', url: certificate.orderUrl },
      { kind: 'link', words: 'Check this certificate', url: certificate.checkUrl },
    ],
  });
}
