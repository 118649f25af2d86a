import { runWidth, splitRuns } from './fonts';
import type { Face } from './fonts';
import { COLOURS } from './colours';
import type { Colour } from './colours';

/** Face, size in points and colour of some text. */
export type Style = { face: Face; size: number; colour: Colour };
/** A stretch of text in one style; a paragraph is several. */
export type Span = { text: string; style: Style };
/** One line of a paragraph, ready to be drawn. */
export type Line = { spans: Span[]; width: number };

const graphemes = new Intl.Segmenter('en', { granularity: 'grapheme' });

export function style(face: Face, size: number, colour: Colour = COLOURS.ink): Style {
  return { face, size, colour };
}

/** Width of text on one line, in points. */
export function textWidth(text: string, { face, size }: Style): number {
  return splitRuns(text, face).reduce((sum, run) => sum + runWidth(run, size), 0);
}

/** Height of a line of this style, in points. */
export function lineHeight({ size }: Style): number {
  return size * 1.38;
}

type Word = { text: string; style: Style; width: number; blankBefore: boolean };

/** Breaks a word that is wider than the line, between characters. */
function breakWord(text: string, wordStyle: Style, width: number): string[] {
  const pieces: string[] = [];
  let piece = '';
  for (const { segment } of graphemes.segment(text)) {
    if (piece !== '' && textWidth(piece + segment, wordStyle) > width) {
      pieces.push(piece);
      piece = '';
    }
    piece += segment;
  }
  return piece === '' ? pieces : [...pieces, piece];
}

function wordsOf(spans: readonly Span[], width: number): Word[] {
  const words: Word[] = [];
  let blankBefore = false;
  for (const span of spans) {
    for (const part of span.text.split(/([ \t\r\n]+)/u)) {
      if (part === '') continue;
      if (/^[ \t\r\n]+$/u.test(part)) {
        blankBefore = true;
        continue;
      }
      const whole = textWidth(part, span.style);
      const pieces = whole <= width ? [part] : breakWord(part, span.style, width);
      for (const piece of pieces) {
        words.push({ text: piece, style: span.style, width: textWidth(piece, span.style), blankBefore });
        blankBefore = false;
      }
    }
  }
  return words;
}

/**
 * Sets a paragraph of spans into lines no wider than `width` points. Words wider than a line are broken, so no text,
 * however long, leaves its column. An empty paragraph has no lines.
 */
export function wrapSpans(spans: readonly Span[], width: number): Line[] {
  const lines: Line[] = [];
  let line: Line | undefined;
  for (const word of wordsOf(spans, width)) {
    const last = line?.spans.at(-1);
    // The blank is as wide as those of the words before it.
    const blank = last && word.blankBefore ? textWidth(' ', last.style) : 0;
    if (!line || !last || line.width + blank + word.width > width + 0.01) {
      line = { spans: [{ text: word.text, style: word.style }], width: word.width };
      lines.push(line);
      continue;
    }
    if (blank > 0) last.text += ' ';
    if (last.style === word.style) last.text += word.text;
    else line.spans.push({ text: word.text, style: word.style });
    line.width += blank + word.width;
  }
  return lines;
}

/** A paragraph in one style. */
export function wrapText(text: string, textStyle: Style, width: number): Line[] {
  return wrapSpans([{ text, style: textStyle }], width);
}

/** The style made smaller, down to `smallest` points, until the text stands on one line; then it has to be wrapped. */
export function shrinkToFit(text: string, textStyle: Style, width: number, smallest: number): Style {
  const natural = textWidth(text, textStyle);
  if (natural <= width) return textStyle;
  return { ...textStyle, size: Math.max(smallest, (textStyle.size * width) / natural) };
}
