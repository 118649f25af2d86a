export type TextEncoding = 'UTF-8' | 'UTF-16' | 'Windows-1252';

/**
 * The text of a file whose encoding is not known: by its byte-order mark, else by the zero bytes of UTF-16, else UTF-8
 * where it is valid, else Windows-1252 (which has every printable character of Latin-1).
 */
export function decodeText(
  bytes: Uint8Array,
): { ok: true; text: string; encoding: TextEncoding } | { ok: false; reason: string } {
  if (startsWith(bytes, 0x50, 0x4b, 0x03, 0x04) || startsWith(bytes, 0xd0, 0xcf, 0x11, 0xe0)) {
    return {
      ok: false,
      reason: 'This is a spreadsheet workbook. Save the sheet as CSV and bring that file.',
    };
  }
  const wide = utf16Of(bytes);
  if (wide) return { ok: true, text: new TextDecoder(wide).decode(bytes), encoding: 'UTF-16' };
  if (bytes.includes(0)) {
    return {
      ok: false,
      reason: 'This is not a text file. Export the bill of materials as CSV and bring that file.',
    };
  }
  try {
    return { ok: true, text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'UTF-8' };
  } catch {
    return { ok: true, text: new TextDecoder('windows-1252').decode(bytes), encoding: 'Windows-1252' };
  }
}

function startsWith(bytes: Uint8Array, ...head: number[]): boolean {
  return head.every((byte, index) => bytes[index] === byte);
}

function utf16Of(bytes: Uint8Array): 'utf-16le' | 'utf-16be' | null {
  if (startsWith(bytes, 0xff, 0xfe)) return 'utf-16le';
  if (startsWith(bytes, 0xfe, 0xff)) return 'utf-16be';
  // Without a mark: Latin text has a zero in every other byte.
  const head = bytes.subarray(0, 200);
  const zeros = [0, 0];
  head.forEach((byte, index) => {
    if (byte === 0) zeros[index % 2] = (zeros[index % 2] ?? 0) + 1;
  });
  const [even = 0, odd = 0] = zeros;
  if (odd > head.length / 3 && even === 0) return 'utf-16le';
  return even > head.length / 3 && odd === 0 ? 'utf-16be' : null;
}
