import type { Understood } from './types';

/** Bytes beyond which a file is no spectrum that is read here. */
const MAX_BYTES = 64 * 1024 * 1024;

type Decoded = { ok: true; text: string; encoding: Understood['encoding'] } | { ok: false; reason: string };

function utf16(bytes: Uint8Array, bigEndian: boolean, from: number): string {
  // TextDecoder does not know utf-16be everywhere, so the pairs are turned round first.
  const even = bytes.slice(from, from + ((bytes.length - from) & ~1));
  if (bigEndian) {
    for (let index = 0; index + 1 < even.length; index += 2) {
      const high = even[index] ?? 0;
      even[index] = even[index + 1] ?? 0;
      even[index + 1] = high;
    }
  }
  return new TextDecoder('utf-16le').decode(even);
}

/** Share of zero bytes at even and odd places: ASCII in UTF-16 has one side full of them. */
function zeroShare(bytes: Uint8Array): { even: number; odd: number } {
  const length = Math.min(bytes.length, 4096) & ~1;
  let even = 0;
  let odd = 0;
  for (let index = 0; index < length; index += 2) {
    if (bytes[index] === 0) even += 1;
    if (bytes[index + 1] === 0) odd += 1;
  }
  const pairs = Math.max(1, length / 2);
  return { even: even / pairs, odd: odd / pairs };
}

/** Text of a file in UTF-8 or UTF-16, with or without byte-order mark, or else Latin-1. Never throws. */
export function decodeText(bytes: Uint8Array): Decoded {
  if (bytes.length === 0) return { ok: false, reason: 'The file is empty.' };
  if (bytes.length > MAX_BYTES)
    return { ok: false, reason: 'The file is larger than 64 MiB; export fewer points.' };
  if (bytes[0] === 0xff && bytes[1] === 0xfe)
    return { ok: true, text: utf16(bytes, false, 2), encoding: 'UTF-16' };
  if (bytes[0] === 0xfe && bytes[1] === 0xff)
    return { ok: true, text: utf16(bytes, true, 2), encoding: 'UTF-16' };
  const zeros = zeroShare(bytes);
  if (zeros.odd > 0.4 && zeros.even < 0.1)
    return { ok: true, text: utf16(bytes, false, 0), encoding: 'UTF-16' };
  if (zeros.even > 0.4 && zeros.odd < 0.1)
    return { ok: true, text: utf16(bytes, true, 0), encoding: 'UTF-16' };
  if (zeros.even + zeros.odd > 0.02) {
    return { ok: false, reason: 'The file is not text: export the trace as CSV.' };
  }
  try {
    return { ok: true, text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'UTF-8' };
  } catch {
    return { ok: true, text: new TextDecoder('windows-1252').decode(bytes), encoding: 'Latin-1' };
  }
}
