import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatCertificateNumber, formatSerial, normaliseScan } from './serials';

describe('numbers of a series', () => {
  it('are padded, and grow past the padding', () => {
    expect(formatSerial('H3', 147)).toBe('H3-0147');
    expect(formatSerial('H3', 10000)).toBe('H3-10000');
    expect(formatCertificateNumber(2027, 412)).toBe('TC-2027-00412');
  });

  it.each([0, -1, 1.5, Number.NaN])('refuse %s', (n) => {
    expect(() => formatSerial('H3', n)).toThrow('Invariant broken');
  });
});

describe('what was scanned', () => {
  it.each([
    ['h3-0147', 'H3-0147'],
    [' H3 - 0147\r\n', 'H3-0147'],
    ['H3-O147', 'H3-0147'],
    ['H3-0I47', 'H3-0147'],
    ['h3-0l47', 'H3-0147'],
    ['H3\u20130147', 'H3-0147'],
    ['H3_0147', 'H3-0147'],
    ['tc-2O27-OO4I2', 'TC-2027-00412'],
    ['L-2291', 'L-2291'],
    ['VO-0007', 'VO-0007'],
    ['rr 473 124 829 xx', 'RR473124829XX'],
    ['Q0ABC', 'Q0ABC'],
    ['1O93', '1093'],
    ['1Q0ABC', '1Q0ABC'],
    ['PSU-ANGLE', 'PSU-ANGLE'],
    ['', ''],
  ])('%j is %j', (text, expected) => {
    expect(normaliseScan(text)).toBe(expected);
  });

  it('comes out the same when read again', () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        const once = normaliseScan(text);
        expect(normaliseScan(once)).toBe(once);
      }),
    );
  });

  it('finds every serial number from its look-alikes', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('H3', 'V40', 'SO5', 'OIL'),
        fc.integer({ min: 1, max: 99999 }),
        (prefix, n) => {
          const serial = formatSerial(prefix, n);
          const [head = '', tail = ''] = serial.split('-');
          const misread = `${head}-${tail.replace(/0/g, 'o').replace(/1/g, 'l')}`.toLowerCase();
          expect(normaliseScan(misread)).toBe(serial);
        },
      ),
    );
  });
});
