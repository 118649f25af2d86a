import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { readBom } from '~/domain/planning/bom-import/read-bom';

// Files that other people's tools wrote, unchanged. They are not part of this project: they lie beside it, or where
// RIGWRIGHT_SAMPLES says. Counts are those of the list that comes with them.
const root = fileURLToPath(new URL('../..', import.meta.url));
const folder = path.join(
  process.env['RIGWRIGHT_SAMPLES'] ?? path.join(root, '..', 'shared', 'samples'),
  'bom',
);
const present = existsSync(folder);
const why = present ? '' : ' (skipped: no sample files; RIGWRIGHT_SAMPLES names their folder)';

function read(name: string) {
  const result = readBom(readFileSync(path.join(folder, name)));
  if (!result.ok) throw new Error(result.reason);
  return result;
}
const sum = (numbers: number[]) => numbers.reduce((a, b) => a + b, 0);

describe.skipIf(!present)(`bills of materials of open hardware${why}`, () => {
  it.each([
    // 55 rows under the headings: 40 groups, 5 blank, 10 of totals.
    ['openbeacon2_kicad_space_refs.csv', 55, 40, 56],
    ['cc1_eeschema_pipe.lst', 202, 202, 202],
    ['hermeslite_frontend_v142.csv', 44, 35, 64],
    ['t41_duallo_kicad7_dnp.csv', 12, 12, 21],
    ['usdx_kicad_ragged.csv', 41, 41, 84],
    ['alexiares_lpf_french_semicolon.csv', 43, 43, 138],
    ['hackrf_one_semicolon_per_part.csv', 414, 414, 414],
    ['kiwi_no_header.csv', 47, 47, 146],
    ['librevna_ibom_checkmarks.csv', 80, 80, 572],
  ])('%s: %i rows, %i lines, %i parts, each place once', (name, rows, lineCount, parts) => {
    const { lines, understood } = read(name);
    expect([understood.rowCount, lines.length, understood.partCount]).toEqual([rows, lineCount, parts]);
    const places = lines.flatMap((line) => line.designators);
    const repeated = name.startsWith('hermes') ? 1 : 0;
    expect(new Set(places).size).toBe(parts - repeated);
    expect(sum(lines.map((line) => line.quantity))).toBe(parts);
  });

  it.each([
    'openbeacon2_kicad_space_refs.csv',
    'cc1_eeschema_pipe.lst',
    't41_duallo_kicad7_dnp.csv',
    'usdx_kicad_ragged.csv',
  ])('%s: nothing to ask', (name) => {
    expect(read(name).questions).toEqual([]);
  });

  it('the list with bars is counted once, though it names every part twice', () => {
    const { lines, understood } = read('cc1_eeschema_pipe.lst');
    expect(understood.notes).toEqual([
      'The same 202 parts are listed again from line 207, in order of value; they were counted once.',
    ]);
    expect(lines.find((line) => line.designators[0] === 'D6')?.value).toBe('Lumex SSF-LXH240GID');
    expect(lines.find((line) => line.designators[0] === 'C11')).toMatchObject({
      value: '4.7u MLCC',
      measure: { value: 4.7e-6, unit: 'F', rest: 'MLCC' },
    });
  });

  it('the Latin-1 file asks about its three contradictions', () => {
    const { lines, questions, understood } = read('hermeslite_frontend_v142.csv');
    expect(questions).toEqual([
      'Line 4: the quantity is 2, but one designator (C18) is named. Which is right?',
      'Line 7: the quantity is 2, but 3 designators (C4, C11, C17) are named. Which is right?',
      'C16 is named on line 5 (150p) and on line 8 (180p). Which is right?',
    ]);
    expect(understood.encoding).toBe('Windows-1252');
    expect(lines.find((line) => line.designators[0] === 'R7')?.description).toContain('¼ W or more');
  });

  it('the file with parts left out keeps them apart: 7 lines, 9 places', () => {
    const out = read('t41_duallo_kicad7_dnp.csv').lines.filter((line) => line.dnp);
    expect(out.flatMap((line) => line.designators)).toEqual([
      'G1',
      'H1',
      'H2',
      'J2',
      'J3',
      'J4',
      'J5',
      'JP1',
      'JP2',
    ]);
  });

  it('the French file has decimal commas and one part that may be left out', () => {
    const { lines, questions, understood } = read('alexiares_lpf_french_semicolon.csv');
    expect(understood.separator).toBe(';');
    expect(questions).toEqual(['Line 44 (C59): “C (nc)” may mean that it is left out. Is it put in?']);
    expect(lines.find((line) => line.designators[0] === 'L4')?.measure).toEqual({
      value: 1.66e-6,
      unit: 'H',
      rest: '',
    });
  });

  it('the file with a part a line asks what its nameless columns are', () => {
    const { lines, questions } = read('hackrf_one_semicolon_per_part.csv');
    expect(questions).toEqual([
      'Some columns have no telling name; going by what stands in them, “Field3” as the description, “Field2” as the part number, “Field4” as what is left out was taken. Is that right?',
    ]);
    expect(lines.filter((line) => line.dnp)).toHaveLength(114);
    expect(lines.find((line) => line.designators[0] === 'C14')).toMatchObject({
      value: '8p2',
      measure: { value: 8.2e-12, unit: 'F' },
      partNumber: 'UMK105CG8R2DV-F',
      description: 'CAP CER 8.2PF 50V NP0 0402',
      dnp: false,
    });
    expect(lines.find((line) => line.designators[0] === 'P20')?.description).toContain('.1" DL');
  });

  it('the file without headings asks which column is which', () => {
    const { lines, questions, understood } = read('kiwi_no_header.csv');
    expect(understood.headings).toBeNull();
    expect(questions).toHaveLength(1);
    expect(questions[0]).toContain(
      'column 7 as the designators, column 2 as the quantity, column 3 as the value',
    );
    expect(lines[2]).toMatchObject({ measure: { value: 28.7, unit: 'ohm' }, partNumber: 'ERJ-2RKF28R7X' });
    expect(lines[10]?.measure).toEqual({ value: 5.6e-11, unit: 'F', rest: '100' });
  });

  it('the file with check marks asks about what is left out and yet ticked', () => {
    const { lines, questions } = read('librevna_ibom_checkmarks.csv');
    expect(questions.map((question) => question.slice(0, question.indexOf(' (')))).toEqual([
      'Line 6',
      'Line 26',
      'Line 73',
      'Line 74',
    ]);
    expect(sum(lines.filter((line) => line.dnp).map((line) => line.quantity))).toBe(28);
    expect(Math.max(...lines.map((line) => line.designators.length))).toBeGreaterThan(60);
  });

  it('the file that was saved twice is refused with a sentence', () => {
    const result = readBom(readFileSync(path.join(folder, 't41_duallo_mangled_semicolon.csv')));
    expect(result.ok ? '' : result.reason).toContain('opened and saved again as one separated by commas');
  });

  describe('changed as other programs would save them', () => {
    const textOf = (name: string) => readFileSync(path.join(folder, name), 'utf8');
    const parts = (bytes: Uint8Array) => {
      const result = readBom(bytes);
      return result.ok ? result.lines.map(({ fileLine: _, ...line }) => line) : result.reason;
    };

    it('in UTF-16 with a byte-order mark', () => {
      const name = 'alexiares_lpf_french_semicolon.csv';
      const wide = Buffer.from(`\ufeff${textOf(name)}`, 'utf16le');
      expect(parts(wide)).toEqual(parts(readFileSync(path.join(folder, name))));
    });

    it('separated by tabs', () => {
      const name = 'openbeacon2_kicad_space_refs.csv';
      const tabs = Buffer.from(textOf(name).replaceAll(',', '\t'));
      expect(parts(tabs)).toEqual(parts(readFileSync(path.join(folder, name))));
    });

    it('with decimal commas between semicolons', () => {
      const text = textOf('alexiares_lpf_french_semicolon.csv').replace(/(\d)\.(\d+[a-zA-Z])/g, '$1,$2');
      const result = readBom(Buffer.from(text));
      const measures = result.ok ? result.lines.map((line) => line.measure) : [];
      expect(measures).toEqual(read('alexiares_lpf_french_semicolon.csv').lines.map((line) => line.measure));
      expect(measures.filter((measure) => measure !== null).length).toBeGreaterThan(30);
    });
  });
});
