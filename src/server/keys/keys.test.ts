import { createPublicKey, generateKeyPairSync } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import {
  digestBuyer,
  generateKeyPair,
  keyId,
  publicKeyOf,
  publicKeyPem,
  signText,
  verifyText,
} from './ed25519';
import { openPrivateKey, sealPrivateKey } from './seal';

describe('signing', () => {
  const pair = generateKeyPair();
  const signature = signText(pair.privatePem, 'H3-0147 µΩ');

  it('holds for the text, and for no other text, key or signature', () => {
    expect(verifyText(pair.publicKey, 'H3-0147 µΩ', signature)).toBe(true);
    expect(verifyText(pair.publicKey, 'H3-0148 µΩ', signature)).toBe(false);
    expect(verifyText(generateKeyPair().publicKey, 'H3-0147 µΩ', signature)).toBe(false);
    const bytes = Buffer.from(signature, 'base64');
    bytes[10] = (bytes[10] ?? 0) ^ 1;
    expect(verifyText(pair.publicKey, 'H3-0147 µΩ', bytes.toString('base64'))).toBe(false);
  });

  it.each([[''], ['AAAA'], ['not base64 at all']])('answers false for the key or signature %j', (bad) => {
    expect(verifyText(bad, 'x', signature)).toBe(false);
    expect(verifyText(pair.publicKey, 'x', bad)).toBe(false);
  });

  it('gives the public key in the form other programs read', () => {
    expect(createPublicKey(publicKeyPem(pair.publicKey)).asymmetricKeyType).toBe('ed25519');
    expect(publicKeyOf(pair.privatePem)).toBe(pair.publicKey);
    expect(keyId(pair.publicKey)).toMatch(/^[0-9a-f]{16}$/u);
  });

  it('refuses a key of another kind', () => {
    const other = generateKeyPairSync('x25519')
      .privateKey.export({ type: 'pkcs8', format: 'pem' })
      .toString();
    expect(() => signText(other, 'x')).toThrow(/not an Ed25519/u);
  });

  it('digests the buyer with the salt', () => {
    const buyer = { callSign: 'Q0ABC', orderNumber: '1093', salt: '00' };
    // printf '{"callSign":"Q0ABC","orderNumber":"1093","salt":"00"}' | sha256sum
    expect(digestBuyer(buyer)).toBe('c05e9fdc34476a6e09b52d76641c7a7a3d3e936c6d6f88ecc478c965c0ea0379');
    expect(digestBuyer({ ...buyer, salt: '01' })).not.toBe(digestBuyer(buyer));
  });
});

describe('sealing', () => {
  const { privatePem } = generateKeyPair();
  const sealed = sealPrivateKey(privatePem, 'a secret of the works');

  it('opens with its secret only, and shows nothing of the key', () => {
    expect(openPrivateKey(sealed, 'a secret of the works')).toBe(privatePem);
    expect(() => openPrivateKey(sealed, 'another')).toThrow(/does not open/u);
    expect(sealed).not.toContain(privatePem.split('\n')[1]);
  });

  it('never gives the same text twice', () => {
    expect(sealPrivateKey(privatePem, 's')).not.toBe(sealPrivateKey(privatePem, 's'));
  });

  it('refuses a changed byte in every part', () => {
    const [scheme, body] = sealed.split('.');
    const bytes = Buffer.from(body ?? '', 'base64url');
    for (const at of [0, 20, 30, bytes.length - 1]) {
      const changed = Buffer.from(bytes);
      changed[at] = (changed[at] ?? 0) ^ 1;
      const text = `${scheme}.${changed.toString('base64url')}`;
      expect(() => openPrivateKey(text, 'a secret of the works')).toThrow(/does not open/u);
    }
  });

  it('refuses another form and an empty secret', () => {
    expect(() => openPrivateKey('sealed-key-9.AAAA', 's')).toThrow(/form/u);
    expect(() => openPrivateKey('', 's')).toThrow(/form/u);
    expect(() => sealPrivateKey(privatePem, '')).toThrow(/secret is needed/u);
  });
});
