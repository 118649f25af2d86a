import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { attachedText, buyerText, canonicalText, publicStatement, signedText } from './canonical';
import { buildStatement } from '../../../tests/pdf/build-statement';
import { fullNumber } from './statement';

const signature = { algorithm: 'Ed25519', keyId: 'k', publicKey: 'p', value: 'v' } as const;

describe('canonical JSON', () => {
  it('reproduces the example of RFC 8785 section 3.2.2 and 3.2.3', () => {
    const input: unknown = JSON.parse(
      String.raw`{"numbers":[333333333.33333329,1E30,4.50,2e-3,0.000000000000000000000000001],
      "string":"\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/","literals":[null,true,false]}`,
    );
    expect(canonicalText(input)).toBe(
      String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`,
    );
  });

  it('sorts members by UTF-16 code units (RFC 8785 section 3.2.3)', () => {
    const input = { '\u20ac': 1, '\r': 2, '\ufb33': 3, '1': 4, '\u{1f600}': 5, '\u0080': 6, '\u00f6': 7 };
    const names = [...canonicalText(input).matchAll(/:(\d)/gu)].map((match) => match[1]);
    expect(names.join('')).toBe('2467153');
  });

  it('is the same however the members were put in, and reads back as the same value', () => {
    fc.assert(
      fc.property(
        fc.dictionary(fc.string({ unit: 'grapheme' }), fc.jsonValue({ stringUnit: 'grapheme' })),
        (value) => {
          const turned = Object.fromEntries(Object.entries(value).reverse());
          expect(canonicalText(turned)).toBe(canonicalText(value));
          expect(canonicalText(JSON.parse(canonicalText(value)))).toBe(canonicalText(value));
        },
      ),
    );
  });

  it.each([
    [Number.NaN],
    [Number.POSITIVE_INFINITY],
    [undefined],
    ['\ud800'],
    [{ a: { '\udc00': 1 } }],
    [[1, undefined]],
  ])('refuses %j', (value) => {
    expect(() => canonicalText(value)).toThrow(TypeError);
  });
});

describe('what is signed', () => {
  const statement = buildStatement();

  it('leaves out the buyer and keeps the digest', () => {
    const open = publicStatement(statement);
    expect(open).not.toHaveProperty('buyer');
    expect(open.buyerDigest).toBe(statement.buyerDigest);
    const text = signedText(statement);
    expect(text).not.toContain('Q0ABC');
    expect(text).not.toContain('1093');
    expect(text).not.toContain(statement.buyer?.salt);
  });

  it('can be rebuilt from the public statement alone', () => {
    expect(signedText(publicStatement(statement))).toBe(signedText(statement));
  });

  it('changes with any word of the public part', () => {
    expect(signedText({ ...statement, issuedBy: 'Someone Else' })).not.toBe(signedText(statement));
    expect(signedText({ ...statement, letter: 'A' })).not.toBe(signedText(statement));
  });

  it('attaches statement, buyer, signature and the way to check', () => {
    const attached: unknown = JSON.parse(attachedText(statement, signature));
    expect(attached).toMatchObject({
      format: 'signed-certificate/1',
      statement: publicStatement(statement),
      buyer: statement.buyer,
      signature,
    });
  });

  it('hashes the buyer as canonical JSON, the salt included', () => {
    expect(buyerText({ salt: '00', callSign: 'Q0ABC', orderNumber: null })).toBe(
      '{"callSign":"Q0ABC","orderNumber":null,"salt":"00"}',
    );
  });

  it('prints the letter behind the number', () => {
    expect(fullNumber({ number: 'TC-2027-00412', letter: '' })).toBe('TC-2027-00412');
    expect(fullNumber({ number: 'TC-2027-00412', letter: 'B' })).toBe('TC-2027-00412B');
  });
});
