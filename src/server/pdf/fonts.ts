import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import fontkit from '@pdf-lib/fontkit';
import type { PDFDocument, PDFFont } from 'pdf-lib';

/** The faces that documents are set in; each falls back, character by character, to faces that know more signs. */
export type Face = 'text' | 'strong' | 'mono' | 'monoStrong' | 'heading';

const FILES = {
  text: '@expo-google-fonts/atkinson-hyperlegible-next/400Regular/AtkinsonHyperlegibleNext_400Regular.ttf',
  strong: '@expo-google-fonts/atkinson-hyperlegible-next/700Bold/AtkinsonHyperlegibleNext_700Bold.ttf',
  mono: '@expo-google-fonts/atkinson-hyperlegible-mono/400Regular/AtkinsonHyperlegibleMono_400Regular.ttf',
  monoStrong:
    '@expo-google-fonts/atkinson-hyperlegible-mono/600SemiBold/AtkinsonHyperlegibleMono_600SemiBold.ttf',
  heading: '@expo-google-fonts/bricolage-grotesque/700Bold/BricolageGrotesque_700Bold.ttf',
  wide: 'dejavu-fonts-ttf/ttf/DejaVuSans.ttf',
  wideStrong: 'dejavu-fonts-ttf/ttf/DejaVuSans-Bold.ttf',
  wideMono: 'dejavu-fonts-ttf/ttf/DejaVuSansMono.ttf',
} as const;

export type FontKey = keyof typeof FILES;

const CHAINS: Record<Face, readonly FontKey[]> = {
  text: ['text', 'wide'],
  strong: ['strong', 'wideStrong', 'wide'],
  mono: ['mono', 'wideMono', 'wide'],
  monoStrong: ['monoStrong', 'wideStrong', 'wide'],
  heading: ['heading', 'wideStrong', 'wide'],
};

/** Text that one font can draw whole. */
type Run = { font: FontKey; text: string };

type Measuring = ReturnType<typeof fontkit.create>;

const resolve = createRequire(import.meta.url).resolve;
const bytesOf = new Map<FontKey, Uint8Array>();
const measuring = new Map<FontKey, Measuring>();
const graphemes = new Intl.Segmenter('en', { granularity: 'grapheme' });

function fontBytes(key: FontKey): Uint8Array {
  let bytes = bytesOf.get(key);
  if (!bytes) {
    bytes = readFileSync(resolve(FILES[key]));
    bytesOf.set(key, bytes);
  }
  return bytes;
}

function measuringFont(key: FontKey): Measuring {
  let font = measuring.get(key);
  if (!font) {
    font = fontkit.create(fontBytes(key));
    measuring.set(key, font);
  }
  return font;
}

/**
 * Text as it will be drawn: composed, one blank for each control or white space, marks of direction left out (letters
 * are set in the order in which they were written, so a mark that turns a name round has no effect here).
 */
function tidy(text: string): string {
  return text
    .toWellFormed()
    .normalize('NFC')
    .replace(/[\s\p{Zs}\p{Zl}\p{Zp}]/gu, (blank) =>
      blank === '\u00a0' || blank === '\u202f' ? '\u00a0' : ' ',
    )
    .replace(/[\ufe00-\ufe0f\u00ad\u061c\u200b\u200e\u200f\u202a-\u202e\u2060-\u2069\ufeff]/gu, '');
}

function has(font: FontKey, cluster: string): boolean {
  return Array.from(cluster).every((sign) =>
    measuringFont(font).hasGlyphForCodePoint(sign.codePointAt(0) ?? 0),
  );
}

function rtl(cluster: string): boolean {
  return /[\p{Script=Hebrew}\p{Script=Arabic}\p{Script=Syriac}\p{Script=Thaana}\p{Script=Nko}]/u.test(
    cluster,
  );
}

/** A sign that no shipped font knows is drawn as its code point, never left out: `[U+4E2D]`. */
function spelledOut(sign: string): string {
  return `[U+${(sign.codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, '0')}]`;
}

function placed(cluster: string, face: Face): Run[] {
  const font = CHAINS[face].find((key) => has(key, cluster));
  if (font) return [{ font, text: cluster }];
  const signs = Array.from(cluster);
  if (signs.length > 1) return signs.flatMap((sign) => placed(sign, face));
  return [{ font: CHAINS[face][0] ?? 'wide', text: spelledOut(cluster) }];
}

/** Splitting and measuring ask the shaper, and a page asks for the same words again and again. */
const splits = new Map<string, Run[]>();
const widths = new Map<string, number>();
const REMEMBERED = 20_000;

function remember<T>(memory: Map<string, T>, key: string, make: () => T): T {
  const known = memory.get(key);
  if (known !== undefined) return known;
  if (memory.size >= REMEMBERED) memory.clear();
  const made = make();
  memory.set(key, made);
  return made;
}

/**
 * Splits text into runs that one font each can draw, in the face asked for where it can. Right-to-left words stand in
 * runs of their own, which the font's shaping turns round; runs follow each other from left to right.
 */
export function splitRuns(text: string, face: Face): Run[] {
  return remember(splits, `${face} ${text}`, () => split(text, face));
}

function split(text: string, face: Face): Run[] {
  const runs: (Run & { rtl: boolean })[] = [];
  for (const { segment } of graphemes.segment(tidy(text))) {
    for (const piece of placed(segment, face)) {
      const last = runs.at(-1);
      const turned = rtl(piece.text);
      if (last && last.font === piece.font && last.rtl === turned) last.text += piece.text;
      else runs.push({ ...piece, rtl: turned });
    }
  }
  return joinTurned(runs).map(({ font, text: words }) => ({ font, text: words }));
}

/** A blank between two right-to-left words belongs to them, or they would follow each other the wrong way. */
function joinTurned(runs: (Run & { rtl: boolean })[]): (Run & { rtl: boolean })[] {
  const joined: (Run & { rtl: boolean })[] = [];
  for (const run of runs) {
    const blank = joined.at(-1);
    const before = joined.at(-2);
    if (run.rtl && before?.rtl && blank && /^[ \u00a0]+$/u.test(blank.text) && before.font === run.font) {
      before.text += blank.text + run.text;
      joined.pop();
    } else {
      joined.push({ ...run });
    }
  }
  return joined;
}

/** Width of a run, as it will be drawn, in points. */
export function runWidth(run: Run, size: number): number {
  const emWidth = remember(widths, `${run.font} ${run.text}`, () => {
    const font = measuringFont(run.font);
    return font.layout(run.text).glyphs.reduce((sum, glyph) => sum + glyph.advanceWidth, 0) / font.unitsPerEm;
  });
  return emWidth * size;
}

/** The fonts of one document: each embedded, as a subset, when it is first asked for. */
export class FontBook {
  readonly #document: PDFDocument;
  readonly #embedded = new Map<FontKey, PDFFont>();

  constructor(document: PDFDocument) {
    this.#document = document;
    document.registerFontkit(fontkit);
  }

  async embed(key: FontKey): Promise<PDFFont> {
    let font = this.#embedded.get(key);
    if (!font) {
      // Without a name of our own the library makes one up, and no two files would be the same.
      const customName = `RWRIGT+${
        FILES[key]
          .split('/')
          .at(-1)
          ?.replace(/\.ttf$/u, '') ?? key
      }`;
      font = await this.#document.embedFont(fontBytes(key), { subset: true, customName });
      this.#embedded.set(key, font);
    }
    return font;
  }
}
