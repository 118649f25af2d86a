import {
  PDFArray,
  PDFBool,
  PDFDict,
  PDFDocument,
  PDFHexString,
  PDFName,
  PDFNumber,
  PDFRef,
  PDFString,
} from 'pdf-lib';
import { describe, expect, it, vi } from 'vitest';
import { renderPackingList } from '~/server/pdf/packing-list';
import { buildBandPoints } from './build-statement';
import { renderStatement } from './render-statement';
import { drawnTextOf, operatorsOf, structureTextOf } from './tools';

vi.setConfig({ testTimeout: 60_000 });

interface Node {
  role: string;
  alt: string | undefined;
  scope: string | undefined;
  children: Node[];
  marks: { page: string; mcid: number }[];
}

function refIn(value: unknown): PDFRef {
  if (value instanceof PDFRef) return value;
  throw new Error('A reference to an object was expected here.');
}

/** The structure tree as another reader finds it, with the file's own words about itself. */
async function treeOf(pdf: Uint8Array) {
  const document = await PDFDocument.load(pdf, { updateMetadata: false });
  const { catalog, context } = document;
  const name = (key: string) => PDFName.of(key);
  const treeDict = catalog.lookup(name('StructTreeRoot'), PDFDict);
  const roots = treeDict.lookup(name('K'), PDFArray);
  const owners = new Map<string, PDFRef>();
  const nums = treeDict.lookup(name('ParentTree'), PDFDict).lookup(name('Nums'), PDFArray);
  const pages = document.getPages();
  for (let at = 0; at < nums.size(); at += 2) {
    const page = pages.find(
      ({ node }) => node.lookup(name('StructParents'), PDFNumber).asNumber() === at / 2,
    );
    const list = nums.lookup(at + 1, PDFArray);
    for (let mcid = 0; mcid < list.size(); mcid += 1) {
      owners.set(`${page?.ref.tag} ${mcid}`, refIn(list.get(mcid)));
    }
  }
  const words = (value: unknown) =>
    value instanceof PDFHexString || value instanceof PDFString ? value.decodeText() : undefined;

  function read(ref: PDFRef, parent: PDFRef): Node {
    const dict = context.lookup(ref, PDFDict);
    expect(dict.get(name('P'))).toBe(parent);
    const kids = dict.lookupMaybe(name('K'), PDFArray);
    const node: Node = {
      role: dict.lookup(name('S'), PDFName).decodeText(),
      alt: words(dict.lookup(name('Alt'))),
      scope: dict.lookupMaybe(name('A'), PDFDict)?.lookup(name('Scope'), PDFName).decodeText(),
      children: [],
      marks: [],
    };
    for (let at = 0; at < (kids?.size() ?? 0); at += 1) {
      const kid = kids?.get(at);
      if (kid instanceof PDFRef) node.children.push(read(kid, ref));
      else {
        const mark =
          kid instanceof PDFDict
            ? { page: kid.get(name('Pg')), mcid: kid.lookup(name('MCID'), PDFNumber).asNumber() }
            : { page: dict.get(name('Pg')), mcid: kid instanceof PDFNumber ? kid.asNumber() : -1 };
        const page = mark.page instanceof PDFRef ? mark.page.tag : '';
        node.marks.push({ page, mcid: mark.mcid });
        // From the page back to the element: a reader that is pointed at a word finds what it is part of.
        expect(owners.get(`${page} ${mark.mcid}`)).toBe(ref);
        owners.delete(`${page} ${mark.mcid}`);
      }
    }
    return node;
  }

  const treeRef = refIn(catalog.get(name('StructTreeRoot')));
  const root = read(refIn(roots.get(0)), treeRef);
  return {
    root,
    strays: [...owners.keys()],
    marked: catalog.lookup(name('MarkInfo'), PDFDict).lookup(name('Marked')) === PDFBool.True,
    language: words(catalog.lookup(name('Lang'))),
    showsTitle:
      catalog.lookup(name('ViewerPreferences'), PDFDict).lookup(name('DisplayDocTitle')) === PDFBool.True,
  };
}

function all(node: Node, role: string): Node[] {
  return [...(node.role === role ? [node] : []), ...node.children.flatMap((child) => all(child, role))];
}

/** The texts of the structure tree in order, without blanks. */
function readAloud(pdf: Uint8Array): string {
  return [...structureTextOf(pdf).matchAll(/^ *"(.*)"$/gmu)]
    .map(([, text]) => text ?? '')
    .join('')
    .replace(/\s/gu, '');
}

const packingList = () =>
  renderPackingList({
    works: { name: 'Thistledown Radio Works', addressLines: ['4 Ropewalk Yard'] },
    orderNumber: '1093',
    packedOn: '2027-03-10',
    packedBy: 'Pia Roe',
    addressee: ['Q0ABC', '1 Field Lane'],
    units: [{ serial: 'H3-0147', model: 'Holm 3', options: '', certificateNumber: 'TC-2027-00412' }],
    spares: [],
    customs: null,
    carrier: 'Post',
    trackingNumber: '',
    parcels: 1,
  });

describe('a tagged file', () => {
  it('says that it is tagged, in which language it is, and shows its title', async () => {
    const { marked, language, showsTitle, strays } = await treeOf(await renderStatement());
    expect({ marked, language, showsTitle, strays }).toEqual({
      ...{ marked: true, language: 'en', showsTitle: true, strays: [] },
    });
  });

  it('has one title, headings, paragraphs, a list of facts and figures in words', async () => {
    const { root } = await treeOf(await renderStatement());
    expect(root.role).toBe('Document');
    expect(all(root, 'H1')).toHaveLength(1);
    expect(all(root, 'H2').length).toBeGreaterThanOrEqual(5);
    expect(all(root, 'P').length).toBeGreaterThan(8);
    for (const item of all(root, 'LI')) {
      expect(item.children.map(({ role }) => role)).toEqual(['Lbl', 'LBody']);
    }
    expect(all(root, 'LI').length).toBeGreaterThan(6);
    expect(all(root, 'Figure').map(({ alt }) => alt)).toEqual([
      'Limit bar, 40 m: 2nd harmonic −54.7 dBc with an uncertainty of 0.9 dB, allowed ≤ −47.9 dBc.',
      'Limit bar, 30 m: 2nd harmonic −49.2 dBc with an uncertainty of 0.9 dB, allowed ≤ −47.7 dBc.',
      'Limit bar, 20 m: 2nd harmonic −51.1 dBc with an uncertainty of 0.9 dB, allowed ≤ −47.2 dBc.',
      'QR code that leads to https://works.example/c/7F3K92QDHM0V',
    ]);
  });

  it('has its readings in a table with heads for columns and rows and no missing cell', async () => {
    const { root } = await treeOf(await renderStatement());
    const [table] = all(root, 'Table');
    const [head, ...rows] = table?.children ?? [];
    expect(head?.children.every(({ role, scope }) => role === 'TH' && scope === 'Column')).toBe(true);
    expect(rows).toHaveLength(5);
    for (const row of rows) {
      const [first, ...cells] = row.children;
      expect(first).toMatchObject({ role: 'TH', scope: 'Row' });
      expect(cells.map(({ role }) => role)).toEqual(Array(8).fill('TD'));
    }
  });

  it.each([
    ['the certificate', () => renderStatement()],
    [
      'an amended one',
      () => renderStatement({ letter: 'A', replaces: { number: 'TC-1', reason: 'A slip.' } }),
    ],
    ['the packing list', packingList],
  ])('is read in the order in which it is drawn: %s', async (_, make) => {
    const pdf = await make();
    const drawn = drawnTextOf(pdf).replace(/\s/gu, '');
    const aloud = readAloud(pdf);
    expect(aloud.length).toBeGreaterThan(200);
    // The foot of the page is decoration: drawn, and not read.
    expect(drawn.startsWith(aloud)).toBe(true);
    expect(drawn.slice(aloud.length)).toMatch(/page1of1$/u);
  });

  it('goes on over pages in one element, and reads repeated heads once', async () => {
    const many = Array.from({ length: 40 }, (_, at) => ({
      ...{ band: `${at + 1} x`, freqHz: 1_000_000 + at, powerW: 3, second: -55, third: -62 },
      ...{ allowed: -47.8, currentA: 0.6 },
    }));
    const pdf = await renderStatement({ points: buildBandPoints(many) });
    const { root, strays } = await treeOf(pdf);
    expect(strays).toEqual([]);
    const pages = new Set(all(root, 'TD').flatMap(({ marks }) => marks.map(({ page }) => page)));
    expect(pages.size).toBeGreaterThan(1);
    for (const table of all(root, 'Table')) {
      const heads = table.children.filter(({ children }) => children.some(({ scope }) => scope === 'Column'));
      expect(heads).toHaveLength(1);
    }
    expect(drawnTextOf(pdf).match(/continued/gu)?.length).toBeGreaterThan(0);
    expect(readAloud(pdf)).not.toContain('continued');
  });

  it('draws nothing outside a mark', async () => {
    let depth = 0;
    const outside: string[] = [];
    let marks = 0;
    for (const line of operatorsOf(await renderStatement()).split('\n')) {
      const operator = line.trim().split(' ').at(-1) ?? '';
      if (operator === 'BDC' || operator === 'BMC') {
        marks += 1;
        depth += 1;
      } else if (operator === 'EMC') depth -= 1;
      else if (depth === 0 && /^(Tj|TJ|f|S|B|re|BT)$/u.test(operator)) outside.push(line);
      expect(depth).toBeGreaterThanOrEqual(0);
      expect(depth).toBeLessThanOrEqual(1);
    }
    expect(depth).toBe(0);
    expect(marks).toBeGreaterThan(80);
    expect(outside).toEqual([]);
  });
});
