import { canonicalText } from './canonical';

/** A public key that the works publishes. */
export interface PublishedKey {
  keyId: string;
  /** Base64 of the 32 raw bytes. */
  publicKey: string;
}

type SignatureCheck =
  | { state: 'holds'; fullNumber: string; keyId: string }
  | { state: 'broken'; fullNumber: string }
  /** Signed with a key that the works has not published. */
  | { state: 'foreign' }
  /** This browser does not know Ed25519. */
  | { state: 'cannot' }
  | { state: 'unreadable' };

interface Attached {
  statement: { number: string; letter: string };
  signature: { keyId: string; value: string };
}

/**
 * Checks the signature over the statement attached to a certificate, with the keys that the works publishes and never
 * with the one in the file. Runs wherever Web Cryptography does.
 *
 * @param text the attached file; null where none was found
 */
export async function checkAttached(
  text: string | null,
  keys: readonly PublishedKey[],
): Promise<SignatureCheck> {
  const attached = text === null ? null : readAttached(text);
  if (attached === null) return { state: 'unreadable' };
  const { statement, signature } = attached;
  const fullNumber = `${statement.number}${statement.letter}`;
  const key = keys.find(({ keyId }) => keyId === signature.keyId);
  if (key === undefined) return { state: 'foreign' };
  try {
    const imported = await crypto.subtle.importKey('raw', bytesOf(key.publicKey), 'Ed25519', false, [
      'verify',
    ]);
    const signed = new TextEncoder().encode(canonicalText(statement));
    const holds = await crypto.subtle.verify('Ed25519', imported, bytesOf(signature.value), signed);
    return holds ? { state: 'holds', fullNumber, keyId: key.keyId } : { state: 'broken', fullNumber };
  } catch {
    return { state: 'cannot' };
  }
}

function readAttached(text: string): Attached | null {
  try {
    const parsed: unknown = JSON.parse(text);
    const statement = member(parsed, 'statement');
    const signature = member(parsed, 'signature');
    const [number, letter] = [member(statement, 'number'), member(statement, 'letter')];
    const [keyId, value] = [member(signature, 'keyId'), member(signature, 'value')];
    if (typeof statement !== 'object' || statement === null) return null;
    if (typeof number !== 'string' || typeof letter !== 'string') return null;
    if (typeof keyId !== 'string' || typeof value !== 'string') return null;
    return { statement: { ...statement, number, letter }, signature: { keyId, value } };
  } catch {
    return null;
  }
}

function member(value: unknown, name: string): unknown {
  return typeof value === 'object' && value !== null ? Reflect.get(value, name) : undefined;
}

function bytesOf(base64: string): Uint8Array<ArrayBuffer> {
  return Uint8Array.from(atob(base64), (character) => character.charCodeAt(0));
}
