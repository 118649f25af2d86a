import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CODE_RANDOM_BYTES, codeFromRandom, formatCode, parseCode } from './code';

const ALPHABET = '0123456789ABCDEFGHJKMNPQRSTVWXYZ';
const codes = fc
  .uint8Array({ minLength: CODE_RANDOM_BYTES, maxLength: CODE_RANDOM_BYTES })
  .map((random) => codeFromRandom(random));

describe('certificate code', () => {
  it('spreads 55 random bits over eleven symbols and adds the check symbol', () => {
    expect(codeFromRandom(new Uint8Array(7))).toBe('000000000000');
    // The last bit is not used; the one before it is the lowest of the eleventh symbol, whose weight is α = 2.
    expect(codeFromRandom(Uint8Array.of(0, 0, 0, 0, 0, 0, 1))).toBe('000000000000');
    expect(codeFromRandom(Uint8Array.of(0, 0, 0, 0, 0, 0, 2))).toBe('000000000012');
    expect(codeFromRandom(Uint8Array.of(255, 255, 255, 255, 255, 255, 255)).slice(0, 11)).toBe('ZZZZZZZZZZZ');
  });

  it('refuses too few random bytes', () => {
    expect(() => codeFromRandom(new Uint8Array(6))).toThrow(RangeError);
  });

  it('reads back what it printed, in any dress', () => {
    fc.assert(
      fc.property(codes, fc.boolean(), fc.constantFrom('-', ' ', '', '–'), (code, lower, dash) => {
        expect(code).toMatch(/^[0-9A-HJKMNP-TV-Z]{12}$/u);
        const dressed = formatCode(code).replaceAll('-', dash);
        expect(parseCode(lower ? dressed.toLowerCase() : dressed)).toEqual({ ok: true, code });
      }),
    );
  });

  it('takes O for 0 and I or L for 1', () => {
    fc.assert(
      fc.property(
        codes,
        fc.constantFrom('I', 'L', 'i', 'l'),
        fc.constantFrom('O', 'o'),
        (code, one, zero) => {
          expect(parseCode(code.replaceAll('1', one).replaceAll('0', zero))).toEqual({ ok: true, code });
        },
      ),
    );
  });

  it('finds every change of one symbol', () => {
    fc.assert(
      fc.property(codes, (code) => {
        let found = 0;
        for (let at = 0; at < 12; at += 1) {
          for (const symbol of ALPHABET) {
            if (symbol === code[at]) continue;
            if (!parseCode(code.slice(0, at) + symbol + code.slice(at + 1)).ok) found += 1;
          }
        }
        expect(found).toBe(12 * 31);
      }),
      { numRuns: 40 },
    );
  });

  it('finds every exchange of two different symbols', () => {
    fc.assert(
      fc.property(codes, (code) => {
        for (let a = 0; a < 12; a += 1) {
          for (let b = a + 1; b < 12; b += 1) {
            if (code[a] === code[b]) continue;
            const symbols = Array.from(code);
            [symbols[a], symbols[b]] = [symbols[b] ?? '', symbols[a] ?? ''];
            expect(parseCode(symbols.join('')).ok).toBe(false);
          }
        }
      }),
      { numRuns: 40 },
    );
  });

  it('lets one in 32 of wholly other codes through, as stated', () => {
    let accepted = 0;
    for (let i = 0; i < 32 * 32 * 32; i += 1) {
      const tail = [i >> 10, i >> 5, i].map((value) => ALPHABET.charAt(value & 31)).join('');
      if (parseCode(`7F3K92QDH${tail}`).ok) accepted += 1;
    }
    expect(accepted).toBe(32 * 32);
  });

  it.each([
    ['7F3K-92QD-HM', /has 10\.$/u],
    ['', /has 0\.$/u],
    ['7F3K-92QD-HMU4', /U cannot be part/u],
    ['7F3K-92QD-HM*4', /\* cannot be part/u],
    ['0000-0000-0001', /slip/u],
  ])('says what is wrong with %j', (typed, sentence) => {
    const parsed = parseCode(typed);
    expect(parsed.ok ? '' : parsed.reason).toMatch(sentence);
  });
});
