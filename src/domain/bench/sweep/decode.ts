import type { Understood } from './types';

/** Bytes beyond which a file is no spectrum that is read here. */
const MAX_BYTES = 64 * 1024 * 1024;
/** How much of a file is looked at to see what it is. */
const LOOKED_AT = 4096;

type Decoded = { ok: true; text: string; encoding: Understood['encoding'] } | { ok: false; reason: string };

/** How files begin that are dropped in the place of a trace. */
const OTHER_FILES: readonly { starts: readonly number[]; what: string }[] = [
  { starts: [0x89, 0x50, 0x4e, 0x47], what: 'a picture' },
  { starts: [0xff, 0xd8, 0xff], what: 'a picture' },
  { starts: [0x47, 0x49, 0x46, 0x38], what: 'a picture' },
  { starts: [0x25, 0x50, 0x44, 0x46], what: 'a PDF' },
  { starts: [0x50, 0x4b, 0x03, 0x04], what: 'a workbook or an archive' },
  { starts: [0x1f, 0x8b], what: 'a compressed file' },
];

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

/** Share of zero bytes at even and odd places (ASCII in UTF-16 has one side full of them), and of control characters. */
function oddBytes(bytes: Uint8Array): { even: number; odd: number; control: number } {
  const length = Math.min(bytes.length, LOOKED_AT);
  let even = 0;
  let odd = 0;
  let control = 0;
  for (let index = 0; index < length; index += 1) {
    const byte = bytes[index] ?? 0;
    if (byte === 0) {
      if (index % 2 === 0) even += 1;
      else odd += 1;
    }
    // Tab, line feed, form feed, carriage return and the end mark of old systems belong to texts.
    else if (byte < 32 && !(byte >= 9 && byte <= 13) && byte !== 26) control += 1;
  }
  const pairs = Math.max(1, length / 2);
  return { even: even / pairs, odd: odd / pairs, control: control / Math.max(1, length) };
}

/** Text of a file in UTF-8 or UTF-16, with or without byte-order mark, or else Latin-1. Never throws. */
export function decodeText(bytes: Uint8Array): Decoded {
  if (bytes.length === 0) return { ok: false, reason: 'The file is empty. Export the trace again.' };
  if (bytes.length > MAX_BYTES)
    return { ok: false, reason: 'The file is larger than 64 MiB; export fewer points.' };
  const other = OTHER_FILES.find(({ starts }) => starts.every((byte, index) => bytes[index] === byte));
  if (other !== undefined) {
    return { ok: false, reason: `The file is ${other.what}, not text: export the trace as CSV.` };
  }
  if (bytes[0] === 0xff && bytes[1] === 0xfe)
    return { ok: true, text: utf16(bytes, false, 2), encoding: 'UTF-16' };
  if (bytes[0] === 0xfe && bytes[1] === 0xff)
    return { ok: true, text: utf16(bytes, true, 2), encoding: 'UTF-16' };
  const odd = oddBytes(bytes);
  if (odd.odd > 0.4 && odd.even < 0.1) return { ok: true, text: utf16(bytes, false, 0), encoding: 'UTF-16' };
  if (odd.even > 0.4 && odd.odd < 0.1) return { ok: true, text: utf16(bytes, true, 0), encoding: 'UTF-16' };
  if (odd.even + odd.odd > 0.02 || odd.control > 0.02) {
    return { ok: false, reason: 'The file is not text: export the trace as CSV.' };
  }
  try {
    return { ok: true, text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'UTF-8' };
  } catch {
    return { ok: true, text: new TextDecoder('windows-1252').decode(bytes), encoding: 'Latin-1' };
  }
}
