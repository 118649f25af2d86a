import { runWidth, splitRuns } from './fonts';
import type { Face } from './fonts';
import { COLOURS } from './colours';
import type { Colour } from './colours';

/** Face, size in points and colour of some text. */
export type Style = { face: Face; size: number; colour: Colour };
/** A stretch of text in one style; a paragraph is several. */
export type Span = { text: string; style: Style };
/** One line of a paragraph, ready to be drawn; a broken one goes on in the next, after a blank. */
export type Line = { spans: Span[]; width: number; isBroken: boolean };

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

/** A word with the style of the blank before it, null where none stands there. */
type Word = { text: string; style: Style; width: number; blank: Style | null };

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
  let blank: Style | null = null;
  for (const span of spans) {
    for (const part of span.text.split(/([ \t\r\n]+)/u)) {
      if (part === '') continue;
      if (/^[ \t\r\n]+$/u.test(part)) {
        blank = span.style;
        continue;
      }
      const whole = textWidth(part, span.style);
      const pieces = whole <= width ? [part] : breakWord(part, span.style, width);
      for (const piece of pieces) {
        words.push({ text: piece, style: span.style, width: textWidth(piece, span.style), blank });
        blank = null;
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
    const blank = word.blank ? textWidth(' ', word.blank) : 0;
    if (!line || line.width + blank + word.width > width + 0.01) {
      if (line) line.isBroken = word.blank !== null;
      line = { spans: [{ text: word.text, style: word.style }], width: word.width, isBroken: false };
      lines.push(line);
      continue;
    }
    if (word.blank) append(line.spans, ' ', word.blank);
    append(line.spans, word.text, word.style);
    line.width += blank + word.width;
  }
  return lines;
}

function append(spans: Span[], text: string, spanStyle: Style): void {
  const last = spans.at(-1);
  if (last && last.style === spanStyle) last.text += text;
  else spans.push({ text, style: spanStyle });
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
