import { createPrivateKey } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { publicKeyOf, signText, verifyText } from '~/server/keys/ed25519';

/**
 * RFC 8032 section 7.1, tests 1 to 3. The first was read in a copy; the secret keys of the second and third are from
 * memory, and their public keys and signatures come out as remembered. Never use these keys for anything else.
 */
const VECTORS = [
  {
    name: 'test 1, no message',
    secret: '9d61b19deffd5a60ba844af492ec2cc44449c5697b326919703bac031cae7f60',
    publicKey: 'd75a980182b10ab7d54bfed3c964073a0ee172f3daa62325af021a68f707511a',
    message: '',
    signature:
      'e5564300c360ac729086e2cc806e828a84877f1eb8e5d974d873e065224901555fb8821590a33bacc61e39701cf9b46bd25bf5f0595bbe24655141438e7a100b',
  },
  {
    name: 'test 2, one byte',
    secret: '4ccd089b28ff96da9db6c346ec114e0f5b8a319f35aba624da8cf6ed4fb8a6fb',
    publicKey: '3d4017c3e843895a92b70aa74d1b7ebc9c982ccf2ec4968cc0cd55f12af4660c',
    message: '72',
    signature:
      '92a009a9f0d4cab8720e820b5f642540a2b27b5416503f8fb3762223ebdb69da085ac1e43e15996e458f3613d0f11d8c387b2eaeb4302aeeb00d291612bb0c00',
  },
  {
    name: 'test 3, two bytes',
    secret: 'c5aa8df43f9f837bedb7442f31dcb7b166d38535076f094b85ce3a2e0b4458f7',
    publicKey: 'fc51cd8e6218a1a38da47ed00230f0580816ed13ba3303ac5deb911548908025',
    message: 'af82',
    signature:
      '6291d657deec24024827e69c3abe01a30ce548a284743a445e3680d7db5ac3ac18ff9b538d16f290ae67f760984dc6594a7c15e9716ed28dc027beceea1ec40a',
  },
];

/** PKCS#8 of an Ed25519 key up to its 32 bytes (RFC 8410 section 7). */
const PKCS8_PREFIX = '302e020100300506032b657004220420';

function pemOf(secret: string): string {
  const der = Buffer.from(PKCS8_PREFIX + secret, 'hex');
  return createPrivateKey({ key: der, type: 'pkcs8', format: 'der' })
    .export({ type: 'pkcs8', format: 'pem' })
    .toString();
}

describe('Ed25519 as in RFC 8032 section 7.1', () => {
  it.each(VECTORS)('$name', ({ secret, publicKey, message, signature }) => {
    const pem = pemOf(secret);
    const publicBase64 = Buffer.from(publicKey, 'hex').toString('base64');
    const bytes = Buffer.from(message, 'hex');
    expect(publicKeyOf(pem)).toBe(publicBase64);
    const signed = signText(pem, bytes);
    expect(Buffer.from(signed, 'base64').toString('hex')).toBe(signature);
    expect(verifyText(publicBase64, bytes, signed)).toBe(true);
    expect(verifyText(publicBase64, Buffer.concat([bytes, Buffer.of(0)]), signed)).toBe(false);
  });
});
