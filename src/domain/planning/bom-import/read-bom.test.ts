import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { BomMapping } from './mapping';
import type { ImportedLine } from './read-bom';
import { readBom } from './read-bom';

const utf8 = (text: string) => new TextEncoder().encode(text);
const latin1 = (text: string) => Uint8Array.from(text, (char) => char.charCodeAt(0));
const utf16 = (text: string, order: 'le' | 'be') => {
  const bytes = Buffer.from(text, 'utf16le');
  return new Uint8Array(order === 'le' ? bytes : bytes.swap16());
};

function read(bytes: Uint8Array, mapping?: BomMapping) {
  const result = readBom(bytes, mapping);
  if (!result.ok) throw new Error(result.reason);
  return result;
}
const brief = (lines: ImportedLine[]) =>
  lines.map((l) => [l.designators.join(' '), l.quantity, l.value] as const);

const plain = [
  ['R1 R2', 2, '4k7'],
  ['C1', 1, '100n'],
] as const;

describe('encodings and separators', () => {
  const csv = 'Ref,Qty,Value\r\n"R1,R2",2,4k7\r\nC1,1,100n\r\n';
  it.each([
    ['UTF-8', utf8(csv), 'UTF-8', ','],
    ['UTF-8 with a mark', utf8(`\ufeff${csv}`), 'UTF-8', ','],
    ['UTF-16 little end first, with a mark', utf16(`\ufeff${csv}`, 'le'), 'UTF-16', ','],
    ['UTF-16 big end first, with a mark', utf16(`\ufeff${csv}`, 'be'), 'UTF-16', ','],
    ['UTF-16 without a mark', utf16(csv, 'le'), 'UTF-16', ','],
    ['semicolons', utf8('Ref;Qty;Value\nR1,R2;2;4k7\nC1;1;100n\n'), 'UTF-8', ';'],
    ['tabs', utf8('Ref\tQty\tValue\nR1, R2\t2\t4k7\nC1\t1\t100n'), 'UTF-8', '\t'],
    ['bars', utf8('Ref | Qty | Value\nR1 R2 | 2 | 4k7\nC1 | 1 | 100n\n'), 'UTF-8', '|'],
    ['old line ends', utf8('Ref,Qty,Value\rR1 R2,2,4k7\rC1,1,100n\r'), 'UTF-8', ','],
  ])('%s', (_name, bytes, encoding, separator) => {
    const { lines, questions, understood } = read(bytes);
    expect(brief(lines)).toEqual(plain);
    expect(questions).toEqual([]);
    expect(understood).toMatchObject({
      encoding,
      separator,
      partCount: 3,
      headings: ['Ref', 'Qty', 'Value'],
    });
  });

  it('reads Latin-1 and says so', () => {
    const { lines, understood } = read(latin1('Qty,Value,Reference,Notes\n1,24,R7,needs \u00bc W or more\n'));
    expect(lines[0]?.description).toBe('needs ¼ W or more');
    expect(understood.encoding).toBe('Windows-1252');
    expect(understood.notes.join()).toContain('Latin-1');
  });

  it('cuts at the separator of the headings, though another stands oftener in the rows', () => {
    const { lines, understood } = read(utf8('Ref;Qty;Value\nR1,R2,R3,R4;4;4k7\nC1,C2,C3,C4,C5;5;100n\n'));
    expect(understood.separator).toBe(';');
    expect(lines.map((l) => l.quantity)).toEqual([4, 5]);
  });

  it('keeps empty cells in front of tabs in their place', () => {
    const { lines } = read(utf8('Notes\tRef\tValue\n\tR1\t10k\n\tR2\t12k\n'));
    expect(brief(lines)).toEqual([
      ['R1', 1, '10k'],
      ['R2', 1, '12k'],
    ]);
  });

  it('reads decimal commas between semicolons', () => {
    const { lines } = read(
      utf8('Référence;Quantité;Désignation;Boîtier;\n"L1,L2";2;"1,66uH";"T50";\nR1;1;4,7k;"0805";\n'),
    );
    expect(lines.map((l) => [l.value, l.measure?.value, l.footprint])).toEqual([
      ['1,66uH', 1.66e-6, 'T50'],
      ['4,7k', 4700, '0805'],
    ]);
  });
});

describe('rows', () => {
  it('may be ragged, blank, or hold totals and remarks', () => {
    const { lines, questions, understood } = read(
      utf8(
        'Nr, Reference, Quantity, Value, Footprint, MPN\n1,R1 ,1,10k,"0805","Q-10"\n2,C1 C2 ,2,"10n"\n\n,,,,Build it without C1\nComponent Count:,,,3\n3,Q1,1,QX7',
      ),
    );
    expect(brief(lines)).toEqual([
      ['R1', 1, '10k'],
      ['C1 C2', 2, '10n'],
      ['Q1', 1, 'QX7'],
    ]);
    expect(lines.map((l) => [l.fileLine, l.partNumber, l.measure !== null])).toEqual([
      [2, 'Q-10', true],
      [3, '', true],
      [7, '', false],
    ]);
    expect(questions).toEqual([]);
    expect(understood).toMatchObject({ rowCount: 6, partCount: 4 });
  });

  it('keep an inch mark that stands alone in a cell', () => {
    const { lines } = read(utf8('ref;value;description\nJ1;GPIO;socket 16 way .1" double\nJ2;AUX;plug\n'));
    expect(lines.map((l) => l.description)).toEqual(['socket 16 way .1" double', 'plug']);
  });

  it('without places count by their quantity', () => {
    const { lines, understood } = read(utf8('Ref,Qty,Value\n,4,M3 screw\nR1,1,10k\n'));
    expect(brief(lines)[0]).toEqual(['', 4, 'M3 screw']);
    expect(understood.partCount).toBe(5);
  });

  it('without headings are told by their content, and that is asked', () => {
    const { lines, questions, understood } = read(
      utf8(
        '#1, 1, 28R7, Makers, QR-2RKF28R7, q-SM0402, R403\n#2, 3, 5K6, Makers, QR-2RKF5601, q-SM0402, R303 R304 R305\n#3, 2, 56p/100, Others, QC-1555C2A, q-SM0402, C401 C404\n',
      ),
    );
    expect(brief(lines)).toEqual([
      ['R403', 1, '28R7'],
      ['R303 R304 R305', 3, '5K6'],
      ['C401 C404', 2, '56p/100'],
    ]);
    expect(lines[2]).toMatchObject({
      measure: { value: 5.6e-11, unit: 'F', rest: '100' },
      partNumber: 'QC-1555C2A',
    });
    expect(understood.headings).toBeNull();
    expect(questions).toHaveLength(1);
    expect(questions[0]).toContain('no row of headings');
  });

  it('follow the mapping that a person confirmed, without asking again', () => {
    const bytes = utf8('Viite,Arvo,Kpl\nR1 R2,4k7,2\nC1,100n,1\n');
    const mapping: BomMapping = {
      designators: [0],
      value: [1],
      quantity: [2],
      footprint: [],
      description: [],
      partNumber: [],
      dnp: [],
      fitted: [],
    };
    const { lines, questions } = read(bytes, mapping);
    expect(brief(lines)).toEqual(plain);
    expect(questions).toEqual([]);
  });

  it('with nameless columns are told by content where the heading tells nothing', () => {
    const { lines, questions } = read(
      utf8(
        'ref;value;Field1;Field2;Field3;Field4\nC1;33pF;Makers;QRM1555C1H;capacitor 33 pF 50 V;\nC2;22pF;Makers;QRM1555C1J;capacitor 22 pF 50 V;DNP\nH1;HOLE;DNP;;;\n',
      ),
    );
    expect(lines.map((l) => [l.partNumber, l.description, l.dnp])).toEqual([
      ['QRM1555C1H', 'capacitor 33 pF 50 V', false],
      ['QRM1555C1J', 'capacitor 22 pF 50 V', true],
      ['', '', true],
    ]);
    expect(questions).toHaveLength(1);
    expect(questions[0]).toContain('“Field2” as the part number');
  });
});

describe('what is left out', () => {
  it('is told by its own columns', () => {
    const { lines } = read(
      utf8(
        '"Reference","Qty","Value","DNP","Exclude from BOM"\n"C1,C2","2","0.1uF 50V","",""\n"H1","1","hole","DNP","Excluded from BOM"\n"J3","1","pins","","Excluded from BOM"\n"J4","1","pins","0",""\n',
      ),
    );
    expect(lines.map((l) => l.dnp)).toEqual([false, true, true, false]);
  });

  it('is asked about where a tick says otherwise or the value only hints', () => {
    const { lines, questions } = read(
      utf8(
        '"Sourced","Placed","References","Value","Quantity"\n"✓","✓","C1, C2","DNP",2\n"✓","","C3","C (nc)",1\n"","no","C4","1n",1\n',
      ),
    );
    expect(lines.map((l) => l.dnp)).toEqual([true, false, true]);
    expect(questions).toEqual([
      'Line 2 (C1, C2): it is marked as left out and ticked as placed. Is it put in?',
      'Line 3 (C3): “C (nc)” may mean that it is left out. Is it put in?',
    ]);
  });
});

describe('contradictions', () => {
  it('are asked about, one by one', () => {
    const { lines, questions } = read(
      utf8(
        'Quantity,Value,Reference\n2,120p,C18\n2,150p,C2 C16\n2,100p,C4 C11 C17\n1,180p,C16\n2,1k,R1 R1\n1,10k,R?\nsome,22k,R9\n',
      ),
    );
    expect(questions).toEqual([
      'Line 7: “R?” is not a designator such as R12 or a range such as R4-R7. Which places does the line fill?',
      'Line 8 (R9): “some” is not a quantity. How many are needed?',
      'Line 2: the quantity is 2, but one designator (C18) is named. Which is right?',
      'Line 4: the quantity is 2, but 3 designators (C4, C11, C17) are named. Which is right?',
      'C16 is named on line 3 (150p) and on line 5 (180p). Which is right?',
      'R1 is named twice on line 6. Is another one meant?',
    ]);
    expect(lines).toHaveLength(7);
  });

  it('are put as one where the whole table stands twice', () => {
    const rows = Array.from({ length: 20 }, (_, i) => `R${i + 1},10k\n`).join('');
    const { questions } = read(utf8(`Ref,Value\n${rows}${rows}`));
    expect(questions).toEqual([
      '20 designators are named more than once (R1, R2, R3, R4, R5, …). Does the file hold the same parts twice?',
    ]);
  });
});

describe('a component list', () => {
  const list = (again: string) =>
    utf8(
      `list of parts >> made on a Sunday\n#Cmp ( order = Reference )\n| C1         1u MLCC     \n| C2         C           \n#End Cmp\n\n#Cmp ( order = Value )\n${again}#End Cmp\n\n#End List\n`,
    );

  it('is counted once where it is given twice', () => {
    const { lines, questions, understood } = read(
      list('| 1u MLCC      C1        \n| C            C2        \n'),
    );
    expect(brief(lines)).toEqual([
      ['C1', 1, '1u MLCC'],
      ['C2', 1, 'C'],
    ]);
    expect(questions).toEqual([]);
    expect(understood.notes).toEqual([
      'The same 2 parts are listed again from line 7, in order of value; they were counted once.',
    ]);
  });

  it('is asked about where its two listings differ', () => {
    const { questions } = read(list('| 2u MLCC      C1        \n| C            C3        \n'));
    expect(questions).toEqual([
      'C1 is 1u MLCC on line 3 and 2u MLCC on line 8. Which is right?',
      'C2 is on line 4, but not in the listing that begins on line 7. Is it in the rig?',
      'C3 is on line 9, but not in the listing that begins on line 2. Is it in the rig?',
    ]);
  });
});

describe('refused with a sentence', () => {
  const damaged =
    '"Id;""Designator"";""Footprint"";""Quantity"";",,\n"1;""L2",L4,"L3"";""L_0603"";3;""FB"";"\n"2;""Y1"";""Osc"";1;""QX"";",,\n';
  it.each([
    ['an empty file', utf8(' \n'), 'The file is empty.'],
    ['a workbook', Uint8Array.of(0x50, 0x4b, 3, 4, 0, 0), 'spreadsheet workbook'],
    ['a picture', Uint8Array.of(0x89, 0x50, 0, 0, 0, 13, 0x49, 0, 7), 'not a text file'],
    ['prose', utf8('Dear builder\nhere is what you need\n'), 'No columns were found'],
    ['a table of something else', utf8('name;town\nAnn;Holm\nBob;Skerry\n'), 'No column of designators'],
    ['headings without rows', utf8('Ref;Value;Qty\n'), 'No line with a designator'],
    ['an open quotation', utf8('Ref,Value\n"R1,10k\nR2,12k\nR3,12k\n'), 'never closed'],
    ['a table saved twice', utf8(damaged), 'opened and saved again'],
    ['a huge file', new Uint8Array(6_000_000), 'larger than 5 MB'],
  ])('%s', (_name, bytes, reason) => {
    const result = readBom(bytes);
    expect(result.ok ? 'read' : result.reason).toContain(reason);
  });
});

describe('whatever comes in', () => {
  it('bytes are read or refused, never thrown at', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), (bytes) => {
        expect(typeof readBom(bytes).ok).toBe('boolean');
      }),
    );
  });

  it('text that resembles a table is read or refused, never thrown at', () => {
    const scrap = fc.constantFrom(
      'Ref',
      'Qty',
      'Value',
      'R1',
      'R1-R9',
      '4k7',
      '3',
      'DNP',
      '"',
      '""',
      ',',
      ';',
      '\t',
      '\n',
      '#Cmp (',
      '| ',
    );
    fc.assert(
      fc.property(fc.array(scrap, { maxLength: 60 }), (pieces) => {
        const result = readBom(utf8(pieces.join('')));
        if (result.ok) expect(result.lines.every((line) => Number.isSafeInteger(line.quantity))).toBe(true);
        else expect(result.reason).toMatch(/\.$/);
      }),
    );
  });

  it('a table that was written is read back, in every encoding and with every separator', () => {
    const row = fc.record({
      count: fc.integer({ min: 1, max: 6 }),
      value: fc.constantFrom('4k7', '100n', '1,66uH', 'QX "B" 7', '10 µF; 16 V'),
    });
    const encode = {
      utf8,
      le: (t: string) => utf16(`\ufeff${t}`, 'le'),
      be: (t: string) => utf16(`\ufeff${t}`, 'be'),
    };
    const quoted = (cell: string) => `"${cell.replaceAll('"', '""')}"`;
    fc.assert(
      fc.property(
        fc.array(row, { minLength: 1, maxLength: 20 }),
        fc.constantFrom(',', ';', '\t', '|'),
        fc.constantFrom(...(['utf8', 'le', 'be'] as const)),
        (rows, separator, encoding) => {
          let next = 1;
          const wanted = rows.map(({ count, value }) => {
            const places = Array.from({ length: count }, () => `R${next++}`).join(' ');
            return [places, count, value] as const;
          });
          const cells = [['Reference', 'Qty', 'Value'], ...wanted.map((one) => one.map(String))];
          const text = cells.map((one) => one.map(quoted).join(separator)).join('\r\n');
          const { lines, questions } = read(encode[encoding](text));
          expect(brief(lines)).toEqual(wanted);
          expect(questions).toEqual([]);
        },
      ),
    );
  });
});
