import { PDFHexString, PDFName, PDFNumber } from 'pdf-lib';
import type { PDFArray, PDFDict, PDFDocument, PDFPage, PDFRef } from 'pdf-lib';

/** Standard structure types of ISO 32000-1, 14.8.4, as far as these papers need them. */
export type Role =
  'Document' | 'H1' | 'H2' | 'P' | 'L' | 'LI' | 'Lbl' | 'LBody' | 'Table' | 'TR' | 'TH' | 'TD' | 'Figure';

/** Those that only hold others: what is drawn right inside one is decoration. */
const GROUPS: ReadonlySet<Role> = new Set<Role>(['Document', 'L', 'LI', 'Table', 'TR']);

interface Options {
  /** What a figure shows, in words. */
  alt?: string;
  /** Of a table's head cell: what it is the head of. */
  scope?: 'Column' | 'Row';
}

/** What was drawn for an element on one page, between one pair of marks. */
interface Piece {
  page: number;
  mcid: number;
}

/** One element of a document's structure: what a reader that does not see the page goes by. */
export class Element {
  readonly role: Role;
  readonly options: Options;
  readonly children: Element[] = [];
  readonly pieces: Piece[] = [];

  constructor(role: Role, options: Options = {}) {
    this.role = role;
    this.options = options;
  }

  get isGroup(): boolean {
    return GROUPS.has(this.role);
  }

  /** Whether there is anything to be read in it; an empty cell still keeps its column's place. */
  get isSaid(): boolean {
    if (this.role === 'TH' || this.role === 'TD') return true;
    return this.pieces.length > 0 || this.children.some((child) => child.isSaid);
  }
}

/**
 * Writes the structure tree into a document: the elements in the order in which they are read, the table from marks on
 * the pages back to them, and that the file is tagged.
 */
export function writeStructure(document: PDFDocument, root: Element, pages: readonly PDFPage[]): void {
  const { context, catalog } = document;
  const owners: PDFRef[][] = pages.map(() => []);
  const treeRef = context.nextRef();
  const documentRef = writeElement(root, treeRef);
  const nums = context.obj([]);
  pages.forEach((page, at) => {
    page.node.set(PDFName.of('StructParents'), PDFNumber.of(at));
    page.node.set(PDFName.of('Tabs'), PDFName.of('S'));
    nums.push(PDFNumber.of(at));
    nums.push(context.register(context.obj(owners[at] ?? [])));
  });
  context.assign(
    treeRef,
    context.obj({
      Type: 'StructTreeRoot',
      K: [documentRef],
      ParentTree: context.register(context.obj({ Nums: nums })),
      ParentTreeNextKey: pages.length,
    }),
  );
  catalog.set(PDFName.of('StructTreeRoot'), treeRef);
  catalog.set(PDFName.of('MarkInfo'), context.obj({ Marked: true }));

  function writeElement(element: Element, parent: PDFRef): PDFRef {
    const ref = context.nextRef();
    const kids: PDFArray = context.obj([]);
    const [first] = element.pieces;
    for (const { page, mcid } of element.pieces) {
      const onPage = owners[page];
      if (onPage !== undefined) onPage[mcid] = ref;
      kids.push(page === first?.page ? PDFNumber.of(mcid) : markOn(page, mcid));
    }
    for (const child of element.children) if (child.isSaid) kids.push(writeElement(child, ref));
    const dict: PDFDict = context.obj({ Type: 'StructElem', S: element.role, P: parent });
    if (kids.size() > 0) dict.set(PDFName.of('K'), kids);
    const pageRef = first === undefined ? undefined : pages[first.page]?.ref;
    if (pageRef !== undefined) dict.set(PDFName.of('Pg'), pageRef);
    const { alt, scope } = element.options;
    if (alt !== undefined) dict.set(PDFName.of('Alt'), PDFHexString.fromText(alt));
    if (scope !== undefined) dict.set(PDFName.of('A'), context.obj({ O: 'Table', Scope: scope }));
    context.assign(ref, dict);
    return ref;
  }

  function markOn(page: number, mcid: number): PDFDict {
    const mark: PDFDict = context.obj({ Type: 'MCR', MCID: mcid });
    const ref = pages[page]?.ref;
    if (ref !== undefined) mark.set(PDFName.of('Pg'), ref);
    return mark;
  }
}
