import canonicalize from 'canonicalize';
import type { BuyerPart, CertificateStatement, PublicStatement, StatementSignature } from './statement';

/**
 * Canonical JSON after RFC 8785: members sorted by UTF-16 code units, no blanks, numbers as ECMAScript prints them.
 * Throws a `TypeError` on what JSON cannot hold (NaN, infinity, undefined at the top, a lone surrogate), since a text
 * that cannot be reproduced must not be signed.
 */
export function canonicalText(value: unknown): string {
  assertReproducible(value);
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('There is nothing here that JSON can hold.');
  return text;
}

function assertReproducible(value: unknown): void {
  if (typeof value === 'number' && !Number.isFinite(value)) throw new TypeError('A number is not finite.');
  if (typeof value === 'string' && !value.isWellFormed())
    throw new TypeError('A text holds half a character.');
  if (Array.isArray(value)) {
    value.forEach((item) => {
      if (item === undefined) throw new TypeError('A list has a gap.');
      assertReproducible(item);
    });
  } else if (typeof value === 'object' && value !== null) {
    for (const [name, member] of Object.entries(value)) {
      assertReproducible(name);
      assertReproducible(member);
    }
  }
}

/**
 * The statement without the buyer's part.
 *
 * This is what is signed, and not the full statement: the public page must let a stranger check the signature, and must
 * not show the call sign. The buyer's part stays bound to the signature through `buyerDigest`, a salted hash inside the
 * signed text; the data in the PDF carries the part itself, so who holds the paper can check that too. When a buyer
 * asks to be forgotten, erasing the part and its salt leaves a digest that says nothing and a signature that still holds.
 */
export function publicStatement(statement: CertificateStatement): PublicStatement {
  const open: PublicStatement & { buyer?: unknown } = { ...statement };
  delete open.buyer;
  return open;
}

/** The text that the works' key signs, to be encoded as UTF-8. */
export function signedText(statement: PublicStatement | CertificateStatement): string {
  return canonicalText('buyer' in statement ? publicStatement(statement) : statement);
}

/** The text whose SHA-256 (over its UTF-8) is the statement's `buyerDigest`. */
export function buyerText(buyer: BuyerPart): string {
  return canonicalText(buyer);
}

const HOW_TO_CHECK = [
  'Take the member "statement", write it as canonical JSON after RFC 8785, encode that as UTF-8.',
  'The signature holds when Ed25519 (RFC 8032) accepts it over these bytes with the public key; both are in base64.',
  'Compare the public key with the one that the works publishes: a key found only in this file proves nothing.',
  'Where "buyer" is not null, the SHA-256 of its canonical JSON in lower-case hex equals "statement.buyerDigest".',
];

/**
 * The data attached to the PDF: the signed statement, the buyer's part that the paper also bears, the signature and
 * how to check it without this program. Ends in a line feed; the same input gives the same text.
 */
export function attachedText(statement: CertificateStatement, signature: StatementSignature): string {
  return (
    canonicalText({
      format: 'signed-certificate/1',
      howToCheck: HOW_TO_CHECK,
      statement: publicStatement(statement),
      buyer: statement.buyer,
      signature,
    }) + '\n'
  );
}
