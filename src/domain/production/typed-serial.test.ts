import { expect, it } from 'vitest';
import { readTypedSerial } from './typed-serial';

it.each([
  ['h3-0147', 'H3-0147'],
  [' h3 – O147 ', 'H3-0147'],
  ['0147', '0147'],
  ['qt40-2631-0007', 'QT40-2631-0007'],
  ['a.12', 'A.12'],
])('%j is %s', (text, serial) => {
  expect(readTypedSerial(text)).toEqual({ ok: true, serial });
});

it.each(['', '   ', 'HOLM', 'H3--1', '-1', 'H3/1', '=H3-1', 'H3-1'.padEnd(31, '1'), 'H3-1\u0000'])(
  '%j is none',
  (text) => {
    expect(readTypedSerial(text).ok).toBe(false);
  },
);
