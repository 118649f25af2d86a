import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lossTableText, readLossFile, readLossTable } from './loss-table';
import type { LossReading } from './loss-rows';

const bytes = (text: string) => new TextEncoder().encode(text);
const rowsOf = (reading: LossReading) => (reading.ok ? reading.rows : reading.reason);
const reasonOf = (reading: LossReading) => (reading.ok ? 'none' : reading.reason);

const two: [number, number][] = [
  [7e6, 40.05],
  [14.5e6, 40],
];

describe('a loss table as typed or as CSV', () => {
  it.each([
    ['units in the cells', '7 MHz 40.05\n14.5 MHz 40'],
    ['units of dB too', '7 MHz, 40.05 dB\n14500 kHz, 40 dB'],
    ['a heading with the unit', 'Frequency (MHz),Loss (dB)\n7,40.05\n14.5,40.0'],
    ['semicolons and decimal commas', 'f/MHz;loss\r\n7,0;40,05\r\n14,5;40,0\r\n'],
    ['blanks and decimal commas', '7,0 MHz 40,05\n14,5 MHz 40,0'],
    ['tabs, remarks and empty lines', '! a pad\n\n7 MHz\t40.05\n# half way\n14.5 MHz\t40\n'],
    ['S21 in dB, and columns beside it', 'Freq Hz,S11 (dB),S21 (dB)\n7e6,-30,-40.05\n14500000,-31,-40'],
    ['a byte-order mark and quotes', '\ufeff"MHz","loss"\n"7","40.05"\n"14.5","40"'],
    ['exponents', '7e6 Hz 4.005e1\n1.45e7 Hz 40'],
  ])('is read with %s', (_, text) => {
    expect(rowsOf(readLossTable(text))).toEqual(two);
  });

  it('takes the unit that the person chose only where the table does not say it', () => {
    expect(rowsOf(readLossTable('7 40.05\n14.5 40', 'MHz'))).toEqual(two);
    expect(rowsOf(readLossTable('7 MHz 40.05\n14.5 MHz 40', 'GHz'))).toEqual(two);
  });

  it.each([
    ['', /no rows: write a frequency and its loss/],
    ['Frequency (MHz),Loss\n', /no rows/],
    ['7 40', /^Line 1 does not say the unit/],
    ['7 MHz 40\n7 MHz 41', /^Line 2 repeats 7 MHz/],
    ['7 MHz 40\n\n3.5 MHz 41', /^Line 3 goes back to 3\.5 MHz after 7 MHz/],
    ['7 MHz NaN', /^Line 1 has 1 column/],
    ['MHz,loss\n7,NaN', /^Line 2: “NaN” is not a loss/],
    ['MHz,loss\nInf,3', /^Line 2: “Inf” is not a frequency/],
    ['7 MHz 40 41', /^Line 1 has 3 columns where 2 are expected/],
    ['MHz,a,b\n7,1,2', /^Line 1 heads 3 columns/],
    ['MHz,S21,loss\n7,1,2', /^Line 1 heads 3 columns/],
    ['7 MHz', /^Line 1 has 1 column/],
    ['7 m 40', /^Line 1: m is not a unit of frequency/],
    ['7 MHz 40 V', /^Line 1: a loss is in dB, not in V/],
    ['7 MHz -40', /^Line 1 has a loss of −40\.00 dB, which is a gain/],
    ['7 MHz 400', /^Line 1 has a loss of 400 dB/],
    ['0 MHz 40', /^Line 1 has a frequency of 0/],
    ['-7 MHz 40', /^Line 1 has a frequency of 0 or below/],
    ['1e999 Hz 40', /^Line 1 has a number that is too large/],
    ['7,000 kHz 40', /^Line 1 has a comma that may part thousands/],
    ['7,5 MHz 40.1', /decimal points and decimal commas/],
  ])('is refused where it is %j', (text, sentence) => {
    expect(reasonOf(readLossTable(text))).toMatch(sentence);
  });

  it('is refused where it has more rows than any analyser gives', () => {
    const text = Array.from({ length: 2002 }, (_, index) => `${index + 1} MHz 3`).join('\n');
    expect(reasonOf(readLossTable(text))).toMatch(/more than 2001 rows/);
  });

  it('takes a seeming gain as small as a measurement may show', () => {
    expect(rowsOf(readLossTable('1 MHz -0.02'))).toEqual([[1e6, -0.02]]);
  });

  it('comes back the same from its own text', () => {
    const freq = fc.double({ min: 1, max: 1e12, noNaN: true });
    const loss = fc.double({ min: 0, max: 200, noNaN: true });
    fc.assert(
      fc.property(fc.array(fc.tuple(freq, loss), { minLength: 1, maxLength: 20 }), (made) => {
        const rows = made.sort(([a], [b]) => a - b).filter(([f], at, all) => f !== all[at - 1]?.[0]);
        expect(rowsOf(readLossTable(lossTableText(rows)))).toEqual(rows);
      }),
    );
  });

  it('never throws, whatever the text and the name', () => {
    const name = fc.constantFrom('pad.csv', 'pad.s1p', 'pad.S2P', 'pad.s4p', '');
    const line = fc.oneof(
      fc.string(),
      fc.constantFrom(
        '# MHz S DB R 50',
        '# GHz',
        '[Version] 2.0',
        '1 -20 0',
        '1 0 0 -3 0 -3 0 0 0',
        '1 MHz 3',
      ),
    );
    fc.assert(
      fc.property(fc.array(line), name, (lines, fileName) => {
        const reading = readLossFile(bytes(lines.join('\n')), fileName);
        expect(typeof reading.ok).toBe('boolean');
      }),
      { numRuns: 500 },
    );
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 400 }), name, (content, fileName) => {
        expect(typeof readLossFile(content, fileName).ok).toBe('boolean');
      }),
    );
  });
});

// Standing wave ratios below follow from RL = −20·lg ρ and ρ = (S − 1)/(S + 1), as tests/reference has them.
const s2p = `! a 10 dB pad
# MHz S DB R 50
1   -30.0 10  -10.02 -1  -10.02 -1  -28.0 4 ! first
10  -26.0 20  -10.00 -9  -10.00 -9  -28.0 8

100 -20.828 20  -10.10 -90 -10.10 -90  -28 8
`;

describe('a Touchstone file', () => {
  it('of two ports gives S21 as a loss, and the larger standing wave ratio', () => {
    const reading = readLossFile(bytes(s2p), 'PAD.S2P');
    expect(rowsOf(reading)).toEqual([
      [1e6, 10.02],
      [10e6, 10],
      [100e6, 10.1],
    ]);
    // A return loss of 20.828 dB is a standing wave ratio of 1.2.
    expect(reading.ok && reading.vswr).toBeCloseTo(1.2, 4);
  });

  it.each([
    ['magnitude and angle', '# MHz S MA R 50', '5 0.1 0 0.01 -3 0.01 -3 0.1 0', 5e6, 40],
    ['real and imaginary part', '# kHz S RI R 50', '5000 0.1 0 0 0.1 0 0.1 0.1 0', 5e6, 20],
    ['what an empty option line stands for', '#', '0.005 0.1 0 0.1 0 0.1 0 0.1 0', 5e6, 20],
    ['options in any order and case', '# r 50 db hz s', '5000000 -20 0 -3 0 -3 0 -20 0', 5e6, 3],
    ['only the first option line', '# Hz S DB R 50\n# GHz S MA R 75', '5e6 -20 0 -3 0 -3 0 -20 0', 5e6, 3],
  ])('is read with %s', (_, option, row, freqHz, lossDb) => {
    const reading = readLossFile(bytes(`${option}\n${row}`), 'part.s2p');
    const [first] = reading.ok ? reading.rows : [];
    expect(first?.[0]).toBeCloseTo(freqHz, 3);
    expect(first?.[1]).toBeCloseTo(lossDb, 9);
  });

  it('of one port gives a standing wave ratio and no loss, and says so', () => {
    const reading = readLossFile(bytes('# MHz S DB R 50\n1 -30 0\n50 -26.444 0\n'), 'load.s1p');
    expect(reading).toMatchObject({ ok: true, rows: [] });
    // A return loss of 26.444 dB is a standing wave ratio of 1.1.
    expect(reading.ok && reading.vswr).toBeCloseTo(1.1, 4);
    expect(reading.ok && reading.note).toMatch(/return loss.*not how much is lost.*1 MHz to 50 MHz/);
  });

  it('of two ports that reflects everything somewhere states no standing wave ratio', () => {
    const reading = readLossFile(
      bytes('# MHz S DB\n1 0 0 -3 0 -3 0 -20 0\n2 -20 0 -3 0 -3 0 -20 0'),
      'a.s2p',
    );
    expect(reading).toMatchObject({ ok: true, vswr: null });
  });

  it.each([
    ['', 'a.s2p', /file is empty/],
    ['! nothing\n', 'a.s2p', /no rows of numbers/],
    ['1 2 3\n', 'a.s1p', /^Line 1 has numbers before the option line/],
    ['# MHz Y MA\n', 'a.s1p', /^Line 1 says Y parameters/],
    ['# MHz S MA R 75\n', 'a.s1p', /^Line 1 refers to 75 Ω/],
    ['# MHz S MA R\n', 'a.s1p', /^Line 1 states no usable reference/],
    ['# MHz S XY\n', 'a.s1p', /^Line 1: “XY” is not known/],
    ['[Version] 2.0\n', 'a.s2p', /^Line 1 belongs to version 2/],
    ['# MHz S DB\n1 -20 0\n', 'a.s2p', /^Line 2 has 3 numbers where a file of two ports has 9/],
    ['# MHz S DB\n1 -20 0 1\n', 'a.s1p', /^Line 2 has 4 numbers where a file of one port has 3/],
    [`${s2p}1 2 3 4 5`, 'a.s2p', /take the noise parameters out/],
    ['# MHz S DB\n2 -20 0\n1 -20 0', 'a.s1p', /^Line 3 goes back to 1 MHz/],
    ['# MHz S DB\n2 -20 0\n2 -20 0', 'a.s1p', /^Line 3 repeats 2 MHz/],
    ['# MHz S DB\n2 NaN 0', 'a.s1p', /^Line 2: “NaN” is not a number/],
    ['# MHz S DB\n2 3 0', 'a.s1p', /^Line 2 says that everything comes back/],
    ['# MHz S MA\n2 -0.1 0', 'a.s1p', /^Line 2 has a magnitude below zero/],
    ['# MHz S MA\n2 0.1 0 0 0 0 0 0.1 0', 'a.s2p', /^Line 2 has an S21 of zero/],
    ['# MHz S DB\n2 -9 0 3 0 3 0 -9 0', 'a.s2p', /^Line 2 has a loss of −3\.00 dB, which is a gain/],
    ['# MHz S DB\n', 'a.s3p', /A file of 3 ports is not read/],
    ['# MHz S DB\n1 2 3', 'a.csv', /Touchstone file by its content/],
  ])('is refused where it is %j (%s)', (text, name, sentence) => {
    expect(reasonOf(readLossFile(bytes(text), name))).toMatch(sentence);
  });
});
