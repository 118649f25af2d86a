import { describe, expect, it } from 'vitest';
import type { z } from 'zod';
import type { CertificateStatement, PublicStatement } from '~/domain/certificates/statement';
import { publicStatement } from '~/domain/certificates/canonical';
import { buildStatement } from '../../tests/pdf/build-statement';
import { certificateStatementSchema, publicStatementSchema } from './certificate-statement';

describe('certificate statement schema', () => {
  it('has the type of the domain', () => {
    // The other direction is in the schema itself (`satisfies`); both are settled by the compiler.
    const statement: z.infer<typeof certificateStatementSchema> =
      buildStatement() satisfies CertificateStatement;
    const open: z.infer<typeof publicStatementSchema> = publicStatement(statement) satisfies PublicStatement;
    expect(open.number).toBe(statement.number);
  });

  it('reads back a statement from JSON unchanged', () => {
    const statement = buildStatement();
    expect(certificateStatementSchema.parse(JSON.parse(JSON.stringify(statement)))).toEqual(statement);
    expect(publicStatementSchema.parse(publicStatement(statement))).toEqual(publicStatement(statement));
  });

  it('refuses the buyer on the public side, and what nobody has declared', () => {
    expect(publicStatementSchema.safeParse(buildStatement()).success).toBe(false);
    expect(certificateStatementSchema.safeParse({ ...buildStatement(), extra: 1 }).success).toBe(false);
  });

  it.each([
    ['testedAt', '9 March 2027'],
    ['issuedOn', '2027-03-09T00:00:00Z'],
    ['letter', 'a'],
    ['buyerDigest', 'Q0ABC'],
    ['points', []],
    ['code', '7F3K-92QD-HM04'],
  ])('refuses %s = %j', (name, value) => {
    expect(certificateStatementSchema.safeParse({ ...buildStatement(), [name]: value }).success).toBe(false);
  });
});
