import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { GreyPicture } from './grey-picture';

/** Runs a program on a PDF written to a folder of its own, which is removed afterwards. */
function withFile<T>(program: string, pdf: Uint8Array, use: (file: string, folder: string) => T): T {
  if (spawnSync(program, ['--version']).error) {
    throw new Error(`${program} is not installed: these tests need Debian's poppler-utils and qpdf.`);
  }
  const folder = mkdtempSync(join(tmpdir(), 'pdf-test-'));
  try {
    const file = join(folder, 'file.pdf');
    writeFileSync(file, pdf);
    return use(file, folder);
  } finally {
    rmSync(folder, { recursive: true });
  }
}

/** The text of a PDF, laid out as on the page. */
export function textOf(pdf: Uint8Array): string {
  return withFile('pdftotext', pdf, (file) =>
    execFileSync('pdftotext', ['-layout', '-enc', 'UTF-8', file, '-'], { encoding: 'utf8' }),
  );
}

/** The text of a PDF in the order in which it was drawn. */
export function drawnTextOf(pdf: Uint8Array): string {
  return withFile('pdftotext', pdf, (file) =>
    execFileSync('pdftotext', ['-raw', '-enc', 'UTF-8', file, '-'], { encoding: 'utf8' }),
  );
}

/** The structure tree of a PDF with its texts, indented, as poppler reads it. */
export function structureTextOf(pdf: Uint8Array): string {
  return withFile('pdfinfo', pdf, (file) =>
    execFileSync('pdfinfo', ['-struct-text', file], { encoding: 'utf8' }),
  );
}

/** The page contents of a PDF as operators in plain text, one after the other. */
export function operatorsOf(pdf: Uint8Array): string {
  return withFile('qpdf', pdf, (file, folder) => {
    const plain = join(folder, 'plain.pdf');
    execFileSync('qpdf', ['--qdf', '--object-streams=disable', '--no-original-object-ids', file, plain]);
    const text = readFileSync(plain, 'latin1');
    return [...text.matchAll(/%% Contents for page \d+[\s\S]*?stream\n([\s\S]*?)\nendstream/gu)]
      .map(([, operators]) => operators ?? '')
      .join('\n');
  });
}

/** Every word of a PDF with its box, in points from the upper left corner, and its page's number from 1. */
export function wordsOf(
  pdf: Uint8Array,
): { page: number; left: number; right: number; bottom: number; text: string }[] {
  const xml = withFile('pdftotext', pdf, (file) =>
    execFileSync('pdftotext', ['-bbox', '-enc', 'UTF-8', file, '-'], { encoding: 'utf8' }),
  );
  return xml.split('<page ').flatMap((part, page) =>
    [
      ...part.matchAll(
        /<word xMin="([\d.-]+)" yMin="[\d.-]+" xMax="([\d.-]+)" yMax="([\d.-]+)">(.*?)<\/word>/gu,
      ),
    ].map(([, left, right, bottom, text]) => ({
      page,
      left: Number(left),
      right: Number(right),
      bottom: Number(bottom),
      text: text ?? '',
    })),
  );
}

/** What the syntax checker says; it exits with an error on anything but a clean file. */
export function syntaxCheck(pdf: Uint8Array): string {
  return withFile('qpdf', pdf, (file) => execFileSync('qpdf', ['--check', file], { encoding: 'utf8' }));
}

/** The names and texts of the attached files. */
export function attachmentsOf(pdf: Uint8Array): Map<string, string> {
  return withFile('pdfdetach', pdf, (file, folder) => {
    rmSync(join(folder, 'out'), { recursive: true, force: true });
    execFileSync('pdfdetach', ['-saveall', '-o', folder, file]);
    return new Map(
      readdirSync(folder)
        .filter((name) => name !== 'file.pdf')
        .map((name) => [name, readFileSync(join(folder, name), 'utf8')]),
    );
  });
}

/** The document's facts, as `Title: …` lines. */
export function factsOf(pdf: Uint8Array): string {
  return withFile('pdfinfo', pdf, (file) => execFileSync('pdfinfo', [file], { encoding: 'utf8' }));
}

/** Names of the fonts, each with whether it is embedded and a subset. */
export function fontsOf(pdf: Uint8Array): { name: string; embedded: boolean; subset: boolean }[] {
  const table = withFile('pdffonts', pdf, (file) => execFileSync('pdffonts', [file], { encoding: 'utf8' }));
  return table
    .split('\n')
    .slice(2)
    .filter((line) => line !== '')
    .map((line) => {
      const [, name = '', flags = ''] =
        /^(\S+).*?\s((?:yes|no)\s+(?:yes|no)\s+(?:yes|no))\s/u.exec(line) ?? [];
      const [embedded, subset] = flags.split(/\s+/u);
      return { name, embedded: embedded === 'yes', subset: subset === 'yes' };
    });
}

/** The first page in shades of grey at a resolution. */
export function pictureOf(pdf: Uint8Array, dpi: number): GreyPicture {
  const image = withFile('pdftoppm', pdf, (file) =>
    execFileSync('pdftoppm', ['-r', String(dpi), '-gray', '-f', '1', '-l', '1', file], {
      maxBuffer: 1 << 28,
    }),
  );
  const head = /^P5\s+(\d+)\s+(\d+)\s+255\s/u.exec(image.subarray(0, 40).toString('latin1'));
  if (!head) throw new Error('The picture of the page is not in the form that was asked for.');
  const pixels = new Uint8Array(image.subarray(head[0].length));
  return { width: Number(head[1]), height: Number(head[2]), pixels };
}

/** The same, from column and row to 0 (black) to 255 (white). */
export function pixelsOf(pdf: Uint8Array, dpi: number): (column: number, row: number) => number {
  const { width, pixels } = pictureOf(pdf, dpi);
  return (column, row) => pixels[Math.floor(row) * width + Math.floor(column)] ?? 255;
}
