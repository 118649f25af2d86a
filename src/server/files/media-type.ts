const signatures: readonly { mediaType: string; at: number; bytes: readonly number[] }[] = [
  { mediaType: 'application/pdf', at: 0, bytes: [0x25, 0x50, 0x44, 0x46, 0x2d] },
  { mediaType: 'image/png', at: 0, bytes: [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a] },
  { mediaType: 'image/jpeg', at: 0, bytes: [0xff, 0xd8, 0xff] },
  { mediaType: 'image/webp', at: 8, bytes: [0x57, 0x45, 0x42, 0x50] },
  { mediaType: 'application/zip', at: 0, bytes: [0x50, 0x4b, 0x03, 0x04] },
];

/** What a file is by what it holds, never by its name: text where it has no byte that text never has. */
export function mediaTypeOf(bytes: Uint8Array): string {
  const found = signatures.find(({ at, bytes: signature }) =>
    signature.every((byte, index) => bytes[at + index] === byte),
  );
  if (found !== undefined) return found.mediaType;
  return isText(bytes) ? 'text/plain' : 'application/octet-stream';
}

/** UTF-16 text begins with its byte-order mark and is full of zero bytes; other text has no control bytes. */
function isText(bytes: Uint8Array): boolean {
  const [first, second] = bytes;
  if ((first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff)) return true;
  return bytes.every((byte) => byte >= 0x20 || (byte >= 0x09 && byte <= 0x0d) || byte === 0x1b);
}
