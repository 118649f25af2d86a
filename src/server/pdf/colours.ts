/** The tokens of the look as RGB from 0 to 1. */
export type Colour = readonly [red: number, green: number, blue: number];

function hex(value: number): Colour {
  return [((value >> 16) & 255) / 255, ((value >> 8) & 255) / 255, (value & 255) / 255];
}

export const COLOURS = {
  ink: hex(0x17211f),
  quiet: hex(0x4a5753),
  rule: hex(0xcfd4cb),
  white: hex(0xffffff),
  patina: hex(0x1b6a61),
  patinaWash: hex(0xdcebe6),
  copper: hex(0xa8521f),
  manila: hex(0xecdcb6),
  manilaEdge: hex(0xcdb67f),
  lamp: hex(0x8a5a00),
  lampWash: hex(0xfbeec8),
  stop: hex(0xa3211b),
  stopWash: hex(0xf7dcd8),
} as const;
