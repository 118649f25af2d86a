import { createCipheriv, createDecipheriv, createHash, randomBytes, scryptSync } from 'node:crypto';

/** Named in the sealed text and bound to it, so that a later scheme can stand beside this one. */
const SCHEME = 'sealed-key-1';
const KEY_BYTES = 32;
const SALT_BYTES = 16;
const NONCE_BYTES = 12;
const TAG_BYTES = 16;

/**
 * Seals a private key for the database: AES-256-GCM under a key drawn from the works' secret by scrypt (N = 2¹⁴, r = 8,
 * p = 1) with a salt of its own. A stolen backup without the secret gives no signatures.
 *
 * @returns `sealed-key-1.` and base64url of salt, nonce, tag and ciphertext.
 */
export function sealPrivateKey(pem: string, secret: string): string {
  const salt = randomBytes(SALT_BYTES);
  const nonce = randomBytes(NONCE_BYTES);
  const cipher = createCipheriv('aes-256-gcm', drawKey(secret, salt), nonce);
  cipher.setAAD(Buffer.from(SCHEME));
  const sealed = Buffer.concat([cipher.update(pem, 'utf8'), cipher.final()]);
  return `${SCHEME}.${Buffer.concat([salt, nonce, cipher.getAuthTag(), sealed]).toString('base64url')}`;
}

/** Opens a sealed key. Throws an `Error` with a plain sentence when the secret is another or a byte has changed. */
export function openPrivateKey(sealed: string, secret: string): string {
  const [scheme, body] = sealed.split('.');
  const bytes = Buffer.from(body ?? '', 'base64url');
  if (scheme !== SCHEME || bytes.length <= SALT_BYTES + NONCE_BYTES + TAG_BYTES) {
    throw new Error('The stored signing key is not in a form that this version can open.');
  }
  const salt = bytes.subarray(0, SALT_BYTES);
  const nonce = bytes.subarray(SALT_BYTES, SALT_BYTES + NONCE_BYTES);
  const tag = bytes.subarray(SALT_BYTES + NONCE_BYTES, SALT_BYTES + NONCE_BYTES + TAG_BYTES);
  const decipher = createDecipheriv('aes-256-gcm', drawKey(secret, salt), nonce, {
    authTagLength: TAG_BYTES,
  });
  decipher.setAAD(Buffer.from(SCHEME));
  decipher.setAuthTag(tag);
  try {
    const rest = bytes.subarray(SALT_BYTES + NONCE_BYTES + TAG_BYTES);
    return Buffer.concat([decipher.update(rest), decipher.final()]).toString('utf8');
  } catch (error) {
    throw new Error('The stored signing key does not open with this secret.', { cause: error });
  }
}

const drawn = new Map<string, Buffer>();

/** Drawing a key takes tens of milliseconds on purpose, and the works' key is opened for every certificate. */
function drawKey(secret: string, salt: Buffer): Buffer {
  if (secret === '') throw new Error('A secret is needed to seal or open the signing key.');
  const name = createHash('sha256').update(salt).update(secret).digest('hex');
  const key = drawn.get(name) ?? scryptSync(secret, salt, KEY_BYTES);
  drawn.clear();
  drawn.set(name, key);
  return key;
}
