import { deflateSync, inflateSync } from 'node:zlib';

/** A picture in shades of grey, a byte a pixel, row by row: 0 black, 255 white. */
export interface GreyPicture {
  width: number;
  height: number;
  pixels: Uint8Array;
}

const SIGNATURE = Buffer.from('89504e470d0a1a0a', 'hex');
const CRC_TABLE = Array.from({ length: 256 }, (_, byte) => {
  let crc = byte;
  for (let bit = 0; bit < 8; bit += 1) crc = crc & 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  return crc;
});

function crcOf(bytes: Uint8Array): number {
  return ~bytes.reduce((crc, byte) => (CRC_TABLE[(crc ^ byte) & 255] ?? 0) ^ (crc >>> 8), -1) >>> 0;
}

function chunk(type: string, data: Uint8Array): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
  const frame = Buffer.alloc(8);
  frame.writeUInt32BE(data.length, 0);
  frame.writeUInt32BE(crcOf(body), 4);
  return Buffer.concat([frame.subarray(0, 4), body, frame.subarray(4)]);
}

/** A picture as a PNG of 8-bit grey. */
export function writePng({ width, height, pixels }: GreyPicture): Buffer {
  const head = Buffer.from([0, 0, 0, 0, 0, 0, 0, 0, 8, 0, 0, 0, 0]);
  head.writeUInt32BE(width, 0);
  head.writeUInt32BE(height, 4);
  // Each row less the one above it (filter 2): rows of white after white come to nothing.
  const rows = Buffer.alloc((width + 1) * height);
  for (let row = 0; row < height; row += 1) {
    rows[row * (width + 1)] = 2;
    for (let x = 0; x < width; x += 1) {
      const above = row === 0 ? 0 : (pixels[(row - 1) * width + x] ?? 0);
      rows[row * (width + 1) + 1 + x] = ((pixels[row * width + x] ?? 0) - above) & 255;
    }
  }
  return Buffer.concat([
    ...[SIGNATURE, chunk('IHDR', head), chunk('IDAT', deflateSync(rows, { level: 9 }))],
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

/** Reads a PNG as {@link writePng} writes it. */
export function readPng(png: Uint8Array): GreyPicture {
  const bytes = Buffer.from(png);
  if (!bytes.subarray(0, 8).equals(SIGNATURE)) throw new Error('This is no PNG.');
  const width = bytes.readUInt32BE(16);
  const height = bytes.readUInt32BE(20);
  const data: Buffer[] = [];
  for (let at = 8; at < bytes.length;) {
    const length = bytes.readUInt32BE(at);
    if (bytes.toString('latin1', at + 4, at + 8) === 'IDAT')
      data.push(bytes.subarray(at + 8, at + 8 + length));
    at += length + 12;
  }
  const rows = inflateSync(Buffer.concat(data));
  const pixels = new Uint8Array(width * height);
  for (let row = 0; row < height; row += 1) {
    if (rows[row * (width + 1)] !== 2) throw new Error('This PNG was written by another program.');
    for (let x = 0; x < width; x += 1) {
      const above = row === 0 ? 0 : (pixels[(row - 1) * width + x] ?? 0);
      pixels[row * width + x] = ((rows[row * (width + 1) + 1 + x] ?? 0) + above) & 255;
    }
  }
  return { width, height, pixels };
}

/** The places at which two pictures of one size differ by more than some shades: smoothing of an edge differs by less. */
export function differingPixels(picture: GreyPicture, other: GreyPicture, tolerance: number): Set<number> {
  const differing = new Set<number>();
  picture.pixels.forEach((value, at) => {
    if (Math.abs(value - (other.pixels[at] ?? 0)) > tolerance) differing.add(at);
  });
  return differing;
}
