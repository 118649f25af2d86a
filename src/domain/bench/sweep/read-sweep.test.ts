import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readSweep } from './read-sweep';
import type { SweepHints } from './types';

const utf8 = (text: string): Uint8Array => new TextEncoder().encode(text);

function read(text: string | Uint8Array, hints: SweepHints = {}) {
  const result = readSweep(typeof text === 'string' ? utf8(text) : text, hints);
  if (!result.ok) throw new Error(result.reason);
  return result;
}

/** What is asked, in one text. */
const asked = ({ questions }: ReturnType<typeof read>): string => questions.map(({ text }) => text).join(' ');

function refusal(text: string | Uint8Array): string {
  const result = readSweep(typeof text === 'string' ? utf8(text) : text);
  if (result.ok) throw new Error('it was read');
  return result.reason;
}

describe('separators, decimals and preambles', () => {
  it.each<[string, string]>([
    ['comma', 'Frequency (Hz),Level (dBm)\n7000000,-20.5\n14000000,-70.1\n21000000,-80\n'],
    [
      'comma, quoted, CRLF',
      '"Frequency (Hz)","Level (dBm)"\r\n"7000000","-20.5"\r\n"14000000","-70.1"\r\n"21000000","-80"',
    ],
    ['semicolon, decimal comma', 'Frequenz [MHz];Pegel [dBm]\n7,0;-20,5\n14,0;-70,1\n21,0;-80,0\n'],
    ['semicolon, trailing separator', 'Freq;dBm;\n7000000;-20.5;\n14000000;-70.1;\n21000000;-80;\n'],
    ['tab', 'kHz\tdBm\n7000\t-20.5\n14000\t-70.1\n21000\t-80\n'],
    ['tab, decimal comma', 'MHz\tdBm\n7,0\t-20,5\n14,0\t-70,1\n21,0\t-80,0\n'],
    ['blanks', '# Freq/Hz  Level/dBm\n  7.0E+006   -20.5\n 14.0E+006   -70.1\n 21.0E+006   -80\n'],
    ['blanks, names with blanks', '% Frequency (Hz)  Level (dBm)\n7E6 -20.5\n14E6 -70.1\n21E6 -80\n'],
    ['blanks, names that do not align', 'Frequency (MHz) and level (dBm)\n7 -20.5\n14 -70.1\n21 -80\n'],
    ['glued units', 'No.,Frequency,Amplitude\n1,7000000.0Hz,-20.5dBm\n2,14.0MHz,-70.1dBm\n3,21.0MHz,-80dBm'],
    ['an index before it', 'n,Freq (Hz),dBm\n0,7000000,-20.5\n1,14000000,-70.1\n2,21000000,-80\n'],
    ['carriage returns alone', 'Freq (Hz),dBm\r7000000,-20.5\r14000000,-70.1\r21000000,-80\r'],
    [
      'exponents of three digits',
      'Hz, dBm\r\n7.0000E+006, -2.0500E+001\r\n1.4E+007, -7.01E+001\r\n2.1E+007, -8E+001',
    ],
    ['more digits than a double holds', 'GHz,dBm\n0.0070000000000000000,-20.5\n0.014,-70.1\n0.021,-80\n'],
    ['blank lines and a footer', 'Hz,dBm\n7e6,-20.5\n\n14e6,-70.1\n\n21e6,-80\n\nEnd of trace\n'],
    ['typographic minus', 'Freq (Hz),dBm\n7000000,\u221220.5\n14000000,\u221270.1\n21000000,\u221280\n'],
  ])('%s', (_, text) => {
    const sweep = read(text);
    expect([...sweep.points.freqHz]).toEqual([7e6, 14e6, 21e6]);
    expect([...sweep.points.level]).toEqual([-20.5, -70.1, -80]);
    expect(sweep.understood.levelCalibrated).toBe(true);
  });

  it.each<[string, string]>([
    ['a colon', 'RBW: 10 kHz\nDetector: Positive peak\nReference Level: 0 dBm\n'],
    ['an equals sign', '! RBW = 10000 Hz\n! Detector = Positive peak\n! Ref Level = 0 dBm\n'],
    ['cells', 'Resolution Bandwidth,10,kHz\nDetector,Positive peak,\nReference Level,0,dBm\n'],
    ['semicolons and a unit in brackets', 'RBW [kHz];10\nDetector;Positive peak\nRef Level [dBm];0\n'],
  ])('a preamble with %s', (_, preamble) => {
    const rows = Array.from(
      { length: 20 },
      (__, index) => `${String(7e6 + index * 5e3)},${String(-60 - index)}`,
    );
    const separated = preamble.includes(';') ? rows.map((row) => row.replace(',', ';')) : rows;
    const mark = preamble.includes(';') ? ';' : ',';
    const sweep = read(`${preamble}Frequency (Hz)${mark}Level (dBm)\n${separated.join('\n')}`);
    expect(sweep.understood).toMatchObject({
      rbwHz: 10e3,
      detector: 'Positive peak',
      referenceDbm: 0,
      points: 20,
    });
    expect(sweep.questions).toEqual([]);
  });
});

describe('encodings', () => {
  const text = 'Fréq (Hz);dBµV\n7000000;86.5\n14000000;36.9\n21000000;27\n';
  const utf16 = (littleEndian: boolean, mark: boolean): Uint8Array => {
    const units = Array.from(mark ? `\ufeff${text}` : text, (letter) => letter.charCodeAt(0));
    const bytes = new Uint8Array(units.length * 2);
    const view = new DataView(bytes.buffer);
    for (const [index, unit] of units.entries()) view.setUint16(2 * index, unit, littleEndian);
    return bytes;
  };
  const latin1 = Uint8Array.from(text, (letter) => letter.charCodeAt(0));

  it.each<[string, Uint8Array, string]>([
    ['UTF-8', utf8(text), 'UTF-8'],
    ['UTF-8 with a mark', utf8(`\ufeff${text}`), 'UTF-8'],
    ['UTF-16 little-endian', utf16(true, true), 'UTF-16'],
    ['UTF-16 big-endian', utf16(false, true), 'UTF-16'],
    ['UTF-16 without a mark', utf16(true, false), 'UTF-16'],
    ['Latin-1', latin1, 'Latin-1'],
  ])('%s', (_, bytes, encoding) => {
    const sweep = read(bytes);
    expect(sweep.understood).toMatchObject({ encoding, units: { freq: 'Hz', level: 'dBµV' } });
    // 0 dBm is 106.990 dBµV in 50 Ω.
    expect(sweep.points.level[0]).toBeCloseTo(86.5 - 106.9897, 4);
  });
});

describe('level units', () => {
  it.each([
    ['dBm', -13.0103, -13.0103],
    ['dBmV', 33.9794, -13.0103],
    ['dBV', -26.0206, -13.0103],
    ['W', 5e-5, -13.0103],
    ['mW', 0.05, -13.0103],
    ['V', 0.05, -13.0103],
  ])('%s', (unit, level, dbm) => {
    const sweep = read(
      `Freq (Hz),Level (${unit})\n7e6,${String(level)}\n14e6,${String(level)}\n21e6,${String(level)}`,
    );
    expect(sweep.understood.units.level).toBe(unit);
    expect(sweep.points.level[0]).toBeCloseTo(dbm, 4);
  });

  it.each([
    ['dB(µV)', 93.9794],
    ['dBuV', 93.9794],
    ['dB (m)', -13.0103],
  ])('%s, as it is also spelled', (unit, level) => {
    const sweep = read(`Freq (Hz),Level ${unit}\n7e6,${String(level)}\n14e6,1\n21e6,1`);
    expect(sweep.points.level[0]).toBeCloseTo(-13.0103, 4);
  });

  it('multiplies out the prefixes of watts that range over decades', () => {
    const sweep = read('Frequency,Level\n7MHz,50uW\n14MHz,1.5nW\n21MHz,20pW\n');
    expect(sweep.understood.units.level).toBe('W');
    expect([...sweep.points.level].map((each) => Math.round(each * 100) / 100)).toEqual([
      -13.01, -58.24, -76.99,
    ]);
  });

  it('says across what a voltage was taken to stand', () => {
    expect(read('Hz,Level (V)\n7e6,1\n14e6,1\n21e6,1').notes.join(' ')).toMatch(/rms across 50 Ω/);
    expect(read('Hz,Level (dBm)\n7e6,1\n14e6,1\n21e6,1').notes).toEqual([]);
  });

  it('asks where no unit is named, and takes the answer', () => {
    const text = 'f,y\n7000000,-20.5\n14000000,-70.1\n21000000,-80\n';
    expect(read(text).understood).toMatchObject({ levelCalibrated: false, units: { level: null } });
    expect(asked(read(text))).toMatch(/unit of the level/);
    expect(read(text, { levelUnit: 'dBm', rbwHz: 1e4, detector: 'peak' })).toMatchObject({
      understood: { levelCalibrated: true, rbwHz: 1e4 },
      questions: [],
    });
  });

  it('does not take dB for dBm', () => {
    const sweep = read('Freq (Hz),S21 (dB)\n7000000,-20.5\n14000000,-70.1\n21000000,-80\n');
    expect(sweep.understood.levelCalibrated).toBe(false);
    expect(asked(sweep)).toMatch(/network analyser/);
  });

  it('asks which of several traces, and takes the one that is named', () => {
    const text = 'Freq (Hz),Trace 1 (dBm),Trace 2 (dBm)\n7e6,-20,-21\n14e6,-70,-71\n21e6,-80,-81\n';
    expect(asked(read(text))).toMatch(/2 traces; “Trace 1 \(dBm\)” was taken/);
    expect(read(text, { levelColumn: 2 }).points.level[0]).toBe(-21);
  });

  it('takes the column of the frequency that a person names', () => {
    const text = 'a,b,c\n1,7.0,-20\n2,7.1,-70\n3,7.2,-80\n';
    const sweep = read(text, { freqColumn: 1, levelColumn: 2, freqUnit: 'MHz', levelUnit: 'dBm' });
    expect([...sweep.points.freqHz]).toEqual([7e6, 7.1e6, 7.2e6]);
  });
});

describe('bandwidth and detector', () => {
  const rows = 'Freq (Hz),dBm\n7e6,-20\n7.01e6,-70\n7.02e6,-80\n';

  it.each<[string, string, SweepHints, string[]]>([
    ['neither said', '', {}, ['bandwidth', 'detector']],
    ['the bandwidth said', 'RBW: 30 kHz\n', {}, ['detector']],
    ['the detector said', 'Detector: Sample\n', {}, ['bandwidth']],
    ['both said', 'RBW: 3 kHz\nDetector: Peak\n', {}, []],
    ['both answered', '', { rbwHz: 3e3, detector: 'peak' }, []],
  ])('%s: asks for what is missing', (_name, preamble, hints, expected) => {
    const { questions } = read(preamble + rows, hints);
    expect(questions.map(({ about }) => about)).toEqual(expected);
    expect(questions.every(({ needsValue }) => needsValue)).toBe(true);
  });

  it('says where a line could fall between two points', () => {
    expect(asked(read(`RBW: 3 kHz\n${rows}`))).toMatch(/10 kHz apart, wider than .* 3 kHz.*peak detector/);
  });
});

describe('refusals', () => {
  it.each<[string, string | Uint8Array, RegExp]>([
    ['nothing', '', /empty/],
    ['nothing but blanks', ' \n\n \n', /no rows of frequency and level/],
    ['prose', 'This is not a sweep.\nIt has words only.\n', /no rows of frequency and level/],
    ['bytes that are no text', new Uint8Array([137, 80, 78, 71, 0, 1, 2, 0, 3, 0, 0, 13]), /not text/],
    [
      'not in order',
      'Freq (Hz),dBm\n7e6,-20\n21e6,-80\n14e6,-70\n28e6,-90\n',
      /not in order: point 3 \(14 MHz\)/,
    ],
    [
      'decreasing frequency',
      'Freq (Hz),dBm\n28e6,-90\n21e6,-80\n14e6,-70\n7e6,-20\n',
      /not in order: point 2 \(21 MHz\) does not lie above the one before it \(28 MHz\).*lowest frequency first/,
    ],
    ['below 0 Hz', 'Freq (Hz),dBm\n-7e6,-20\n0,-80\n14e6,-70\n', /no usable frequency/],
    ['the same frequency twice', 'Freq (Hz),dBm\n7e6,-20\n7e6,-80\n14e6,-70\n', /not in order/],
    [
      'a word in a row',
      'Freq (Hz),dBm\n7e6,-20\n14e6,---\n21e6,-70\n28e6,-70\n',
      /Line 3 has “---” where a number/,
    ],
    ['NaN in the first row', 'Freq (Hz),dBm\n7e6,NaN\n14e6,-60\n21e6,-70\n28e6,-70\n', /Line 2 has “NaN”/],
    ['NaN in the last row', 'Freq (Hz),dBm\n7e6,-20\n14e6,-60\n21e6,-70\n28e6,nan\n', /Line 5 has “nan”/],
    ['Inf in a row', 'Freq (Hz),dBm\n7e6,-20\n14e6,-Inf\n21e6,-70\n28e6,-70\n', /Line 3 has “-Inf”/],
    ['a number beyond all bounds', 'Freq (Hz),dBm\n7e6,-20\n14e6,1e999\n21e6,-7\n28e6,-7\n', /“1e999”/],
    ['a last line cut off', 'Freq (Hz),dBm\n7e6,-20\n14e6,-60\n21e6,-70\n28e6\n', /Line 5 has 1 cell/],
    ['an empty cell', 'Freq (Hz),dBm,dBm\n7e6,-20,1\n14e6,,1\n21e6,-70,1\n28e6,-7,1\n', /an empty cell/],
    ['NaN in a row', 'Freq (Hz),dBm\n7e6,-20\n14e6,NaN\n21e6,-70\n28e6,-70\n', /Line 3 has “NaN”/],
    [
      'a cell missing',
      'Freq (Hz),dBm\n7e6,-20\n14e6\n21e6,-70\n28e6,-70\n',
      /Line 3 has 1 cell where the others have 2/,
    ],
    [
      'a hole',
      'Freq (Hz),dBm\n7e6,-20\n8e6,-70\n9e6,-70\n14e6,-70\n15e6,-70\n16e6,-7\n',
      /missing between 9 MHz and 14 MHz/,
    ],
    [
      'commas twice',
      'Freq (Hz),dBm\n7000000,0,-20,5\n14000000,0,-70,1\n21000000,0,-80,0\n',
      /both in the numbers and between/,
    ],
    [
      'commas twice, without a heading',
      '7,030,-20,5\n7,040,-70,1\n7,050,-80,0\n7,060,-80,2\n',
      /both in the numbers and between/,
    ],
    ['levels in two units', 'Freq,Level\n7MHz,-20dBm\n14MHz,37dBuV\n21MHz,-80dBm\n', /more than one unit/],
    ['no level', 'Freq (Hz),phase\n7e6,0\n14e6,1\n21e6,2\n', /no level/],
    ['zero watts', 'Freq (Hz),Level (W)\n7e6,1\n14e6,0\n21e6,1\n', /zero or below in W/],
    [
      'bins that do not add up',
      'Start: 0 Hz\nStop: 5000 Hz\nBINs: 9\n-3,1\n-2,0\n-5,1\n',
      /announces 9 points and holds 3/,
    ],
  ])('%s', (_, text, reason) => {
    expect(refusal(text)).toMatch(reason);
  });

  it.each<[string, number[], RegExp]>([
    [
      'a PNG',
      [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0x49, 0x48],
      /is a picture, not text/,
    ],
    ['a JPEG', [0xff, 0xd8, 0xff, 0xe0, 0x4a, 0x46, 0x49, 0x46, 0x33, 0x91, 0x85], /is a picture, not text/],
    ['a PDF', [0x25, 0x50, 0x44, 0x46, 0x2d, 0x31], /is a PDF/],
    ['a workbook', [0x50, 0x4b, 0x03, 0x04, 0x14], /workbook.*export the trace as CSV/],
    ['bytes without a meaning', Array.from({ length: 300 }, (_, index) => (index * 37) % 29), /not text/],
  ])('%s called .csv', (_name, bytes, reason) => {
    expect(refusal(Uint8Array.from(bytes))).toMatch(reason);
  });

  describe('one point missing', () => {
    const without = (gone: number, freqOf: (index: number) => string) =>
      `Freq (MHz),dBm\n${Array.from({ length: 40 }, (_, index) => `${freqOf(index)},-80`)
        .filter((_, index) => index !== gone)
        .join('\n')}`;

    it('is a hole between even steps', () => {
      expect(refusal(without(20, (index) => (7 + index * 0.01).toFixed(4)))).toMatch(
        /Points are missing between 7\.19 MHz and 7\.21 MHz/,
      );
    });

    it('is none where the steps are uneven because the frequencies were rounded', () => {
      const sweep = read(without(-1, (index) => (7 + index * 0.0155).toFixed(2)));
      expect(sweep.understood.points).toBe(40);
    });

    it('is none where the steps grow, as in a logarithmic sweep', () => {
      expect(read(without(-1, (index) => (1.2 ** index).toFixed(6))).understood.points).toBe(40);
    });
  });

  it('a second trace beneath the first is asked about, not taken for a hole', () => {
    const trace = '7e6,-20\n14e6,-60\n21e6,-70\n';
    const sweep = read(`RBW: 1 kHz\nDetector: peak\nTrace 1 (Hz, dBm)\n${trace}Trace 2\n${trace}`);
    expect(asked(sweep)).toMatch(/2 traces below one another/);
    expect(sweep.understood.points).toBe(3);
  });

  it('more than 200,000 points', () => {
    const rows = (count: number) =>
      `Freq (Hz),dBm\n${Array.from({ length: count }, (_, index) => `${String(1e6 + 100 * index)},-80`).join('\n')}`;
    expect(read(rows(200_000)).understood.points).toBe(200_000);
    expect(refusal(rows(200_001))).toMatch(/more than 200,000 points/);
  });
});

describe('row blocks', () => {
  const blocks = [
    '2027-03-09, 10:00:00, 2000, 3000, 500.00, 10, -70.1, -71.5, -71.5',
    '2027-03-09, 10:00:00, 1000, 2000, 500.00, 10, -60.0, -61.0, -61.0',
  ];

  it('are put in order, without the repeated last level', () => {
    const sweep = read(blocks.join('\n'));
    expect([...sweep.points.freqHz]).toEqual([1000, 1500, 2000, 2500]);
    expect([...sweep.points.level]).toEqual([-60, -61, -70.1, -71.5]);
    expect(sweep.understood).toMatchObject({ form: 'row blocks', levelCalibrated: false });
  });

  it('are refused with a level that is no number', () => {
    expect(refusal(blocks.join('\n').replace('-61.0', 'nan'))).toMatch(
      /Line 2 has a level that is not a number/,
    );
  });
});

describe('readSweep, its law', () => {
  const alphabet = fc.constantFrom(
    ...'0123456789.,;-+eE \t\r\n"#:HzdBmkMµ%()/2027-03-09'.split(''),
    '7000000,-20\n',
    'Freq,dBm\n',
  );

  it('never throws, whatever the bytes', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 600 }), (bytes) => typeof readSweep(bytes).ok === 'boolean'),
      { numRuns: 400 },
    );
  });

  it('never throws on what looks like a file, and then holds only finite rising points', () => {
    fc.assert(
      fc.property(fc.array(alphabet, { maxLength: 300 }), (letters) => {
        const result = readSweep(utf8(letters.join('')));
        if (!result.ok) return result.reason.length > 0;
        const { freqHz, level } = result.points;
        return (
          freqHz.length === level.length &&
          level.every((each) => Number.isFinite(each)) &&
          freqHz.every(
            (each, index) => Number.isFinite(each) && (index === 0 || each > (freqHz[index - 1] ?? 0)),
          )
        );
      }),
      { numRuns: 400 },
    );
  });

  it('reads each number as the language does', () => {
    const digits = fc.stringMatching(/^[+-]?(\d{1,20}|\d{0,9}\.\d{1,12}|\d{1,9}\.)(e[+-]?\d{1,2})?$/);
    fc.assert(
      fc.property(fc.array(digits, { minLength: 4, maxLength: 8 }), (texts) => {
        const rows = texts.map((text, index) => `${String(index + 2)},${text}`);
        const result = readSweep(utf8(`Freq (MHz),Level (dBm)\n${rows.join('\n')}\n`));
        if (!result.ok) return false;
        const isUnused = texts.every((text) => Number(text) === 0);
        return isUnused || texts.every((text, index) => result.points.level[index] === Number(text));
      }),
      { numRuns: 300 },
    );
  });

  it('reads back any rising sweep written with commas or semicolons', () => {
    const row = fc.tuple(fc.integer({ min: 1, max: 5 }), fc.integer({ min: -1200, max: 300 }));
    fc.assert(
      fc.property(fc.array(row, { minLength: 3, maxLength: 40 }), fc.boolean(), (rows, german) => {
        let freqHz = 5e6;
        const points = rows.map(([, tenths]) => [(freqHz += 1000), tenths / 10] as const);
        const mark = german ? ';' : ',';
        const body = points.map(
          ([f, l]) => `${String(f)}${mark}${german ? l.toFixed(1).replace('.', ',') : l.toFixed(1)}`,
        );
        const sweep = read(`Frequency (Hz)${mark}Level (dBm)\n${body.join('\n')}\n`);
        // A trace that is zero throughout is taken for an unused column.
        return points.every(
          ([f, l], index) => sweep.points.freqHz[index] === f && sweep.points.level[index] === l + 0,
        );
      }),
    );
  });
});
