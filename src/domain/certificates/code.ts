/**
 * The code under the QR picture: twelve symbols of Crockford's base 32 (digits and letters without I, L, O, U), eleven
 * of them random (55 bits, not to be found by trying), the last their check symbol.
 *
 * Crockford's own check symbol is a remainder modulo 37 and so needs five signs (`*~$=U`) that are hard to read out and
 * to type on a small keyboard. Here the check symbol comes from the same 32: symbols are elements of the field GF(32)
 * (polynomial x⁵ + x² + 1, α = 2), and a code is valid when Σ αⁱ·sᵢ = 0 with i counted from the right, from 0. The
 * twelve weights are distinct and not zero, so every change of one symbol and every exchange of two different symbols,
 * neighbours or not, is found. Anything worse passes with a chance of 1 in 32.
 */
const ALPHABET = '0123456789ABCDEFGHJKMNPQRSTVWXYZ';
const LENGTH = 12;
const DATA_LENGTH = LENGTH - 1;
/** Random bytes that one code takes; the last bit is not used. */
export const CODE_RANDOM_BYTES = 7;

function timesAlpha(element: number): number {
  const shifted = element << 1;
  return shifted & 32 ? (shifted ^ 0b100101) & 31 : shifted;
}

/** Σ αⁱ·sᵢ by Horner's rule from the left. */
function weightedSum(values: readonly number[]): number {
  return values.reduce((sum, value) => timesAlpha(sum) ^ value, 0);
}

function symbolAt(value: number): string {
  return ALPHABET.charAt(value & 31);
}

/**
 * A code from random bytes given by the caller.
 *
 * @param random `CODE_RANDOM_BYTES` bytes from a generator fit for secrets; throws a `RangeError` on fewer.
 * @returns twelve symbols without dashes.
 */
export function codeFromRandom(random: Uint8Array): string {
  if (random.length < CODE_RANDOM_BYTES)
    throw new RangeError(`A code takes ${CODE_RANDOM_BYTES} random bytes.`);
  let bits = random.slice(0, CODE_RANDOM_BYTES).reduce((all, byte) => (all << 8n) | BigInt(byte), 0n) >> 1n;
  const values: number[] = [];
  for (let i = 0; i < DATA_LENGTH; i += 1) {
    values.unshift(Number(bits & 31n));
    bits >>= 5n;
  }
  values.push(weightedSum([...values, 0]));
  return values.map(symbolAt).join('');
}

/** Three groups of four, as printed: `7F3K-92QD-HM04`. */
export function formatCode(code: string): string {
  return [code.slice(0, 4), code.slice(4, 8), code.slice(8)].join('-');
}

type ParsedCode = { ok: true; code: string } | { ok: false; reason: string };

/**
 * Reads a code as a person types it: either case, O for 0, I or L for 1, dashes and blanks anywhere or nowhere.
 * The reason is a sentence for the person.
 */
export function parseCode(typed: string): ParsedCode {
  const code = typed
    .toUpperCase()
    .replace(/[\s\u2010-\u2015\u2212_.-]/gu, '')
    .replaceAll('O', '0')
    .replace(/[IL]/gu, '1');
  const stranger = Array.from(code).find((symbol) => !ALPHABET.includes(symbol));
  if (stranger !== undefined) {
    return {
      ok: false,
      reason: `A code has only digits and letters, and no U: ${stranger} cannot be part of one.`,
    };
  }
  if (code.length !== LENGTH) {
    return { ok: false, reason: `A code has ${LENGTH} digits and letters; this one has ${code.length}.` };
  }
  if (weightedSum(Array.from(code).map((symbol) => ALPHABET.indexOf(symbol))) !== 0) {
    return { ok: false, reason: 'This code has a slip in it: compare it with the paper, symbol by symbol.' };
  }
  return { ok: true, code };
}
