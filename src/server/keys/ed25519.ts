import {
  createHash,
  createPrivateKey,
  createPublicKey,
  generateKeyPairSync,
  sign,
  verify,
} from 'node:crypto';
import type { KeyObject } from 'node:crypto';
import { buyerText } from '~/domain/certificates/canonical';
import type { BuyerPart } from '~/domain/certificates/statement';

/** SubjectPublicKeyInfo of an Ed25519 key up to its 32 bytes (RFC 8410 section 4). */
const SPKI_PREFIX = Buffer.from('302a300506032b6570032100', 'hex');
const RAW_LENGTH = 32;

/** @returns the private key as PKCS#8 PEM and the public key as base64 of its 32 raw bytes. */
export function generateKeyPair(): { privatePem: string; publicKey: string } {
  const { privateKey } = generateKeyPairSync('ed25519');
  const privatePem = privateKey.export({ type: 'pkcs8', format: 'pem' }).toString();
  return { privatePem, publicKey: publicKeyOf(privatePem) };
}

/** The public key (base64 of 32 raw bytes) that belongs to a private one. Throws on a key that is not Ed25519. */
export function publicKeyOf(privatePem: string): string {
  const der = createPublicKey(openPrivate(privatePem)).export({ type: 'spki', format: 'der' });
  return der.subarray(SPKI_PREFIX.length).toString('base64');
}

/** Signs bytes, or the UTF-8 of a text (RFC 8032, pure Ed25519). @returns base64 of 64 bytes. */
export function signText(privatePem: string, text: string | Uint8Array): string {
  return sign(null, Buffer.from(text), openPrivate(privatePem)).toString('base64');
}

/**
 * Whether a signature (base64) holds for bytes, or for the UTF-8 of a text, under a public key (base64 of 32 raw bytes).
 * False, and no error, for a key or signature of the wrong shape: both may come from a stranger.
 */
export function verifyText(publicKey: string, text: string | Uint8Array, signature: string): boolean {
  const raw = Buffer.from(publicKey, 'base64');
  const bytes = Buffer.from(signature, 'base64');
  if (raw.length !== RAW_LENGTH || bytes.length !== 64) return false;
  return verify(null, Buffer.from(text), publicKeyObject(raw), bytes);
}

/** The public key as SPKI PEM, the form that other programs read. */
export function publicKeyPem(publicKey: string): string {
  return publicKeyObject(Buffer.from(publicKey, 'base64')).export({ type: 'spki', format: 'pem' }).toString();
}

/** A short name for a public key: the first 16 hex digits of the SHA-256 of its 32 raw bytes. */
export function keyId(publicKey: string): string {
  return createHash('sha256').update(Buffer.from(publicKey, 'base64')).digest('hex').slice(0, 16);
}

/** The `buyerDigest` of a statement: SHA-256 of the buyer's part as canonical JSON, lower-case hex. */
export function digestBuyer(buyer: BuyerPart): string {
  return createHash('sha256').update(buyerText(buyer), 'utf8').digest('hex');
}

function openPrivate(pem: string): KeyObject {
  const key = createPrivateKey(pem);
  if (key.asymmetricKeyType !== 'ed25519') throw new TypeError('The private key is not an Ed25519 key.');
  return key;
}

function publicKeyObject(raw: Buffer): KeyObject {
  return createPublicKey({ key: Buffer.concat([SPKI_PREFIX, raw]), type: 'spki', format: 'der' });
}
