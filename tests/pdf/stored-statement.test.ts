import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { attachedText, signedText } from '~/domain/certificates/canonical';
import { certificateStatementSchema, publicStatementSchema } from '~/schemas/certificate-statement';
import { verifyText } from '~/server/keys/ed25519';
import { renderCertificate } from '~/server/pdf/certificate';
import { attachmentsOf, textOf } from './tools';

// The data of a certificate of the first form, as it was attached to its PDF then: none of the members that came later.
const stored = readFileSync('tests/pdf/stored/TC-2027-00412.json', 'utf8');
const parts = z
  .object({
    statement: z.record(z.unknown()),
    buyer: z.unknown(),
    signature: z.object({
      algorithm: z.literal('Ed25519'),
      keyId: z.string(),
      publicKey: z.string(),
      value: z.string(),
    }),
  })
  .parse(JSON.parse(stored));

describe('a certificate of the first form', () => {
  it('is read as it was signed, and still verifies', () => {
    const statement = publicStatementSchema.parse(parts.statement);
    expect(statement).toEqual(parts.statement);
    expect(verifyText(parts.signature.publicKey, signedText(statement), parts.signature.value)).toBe(true);
  });

  it('is printed with the same data in it, to the letter', async () => {
    const statement = certificateStatementSchema.parse({ ...parts.statement, buyer: parts.buyer });
    expect(attachedText(statement, parts.signature)).toBe(stored);
    const pdf = await renderCertificate(statement, parts.signature);
    expect(attachmentsOf(pdf).get('TC-2027-00412.json')).toBe(stored);
    expect(textOf(pdf)).toContain('3.12 W');
  }, 30_000);

  it('does not verify with a member put in that it did not have', () => {
    const statement = publicStatementSchema.parse({ ...parts.statement, place: 'at the works' });
    expect(verifyText(parts.signature.publicKey, signedText(statement), parts.signature.value)).toBe(false);
  });
});
