import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { splitRuns } from '~/server/pdf/fonts';
import { shrinkToFit, style, textWidth, wrapSpans, wrapText } from '~/server/pdf/text-layout';

const body = style('text', 10);
const bold = style('strong', 10);
const words = (text: string) => text.replace(/\s/gu, '');

describe('wrapping', () => {
  const texts = fc.string({ unit: fc.constantFrom(...Array.from('aW i.Ωµη−ЖΑ שa \n')), maxLength: 120 });

  it('keeps every character and every line within the width', () => {
    fc.assert(
      fc.property(texts, texts, fc.integer({ min: 20, max: 300 }), (first, second, width) => {
        const lines = wrapSpans(
          [
            { text: first, style: body },
            { text: second, style: bold },
          ],
          width,
        );
        const drawn = lines.flatMap((line) => line.spans.map((span) => span.text)).join('');
        expect(words(drawn)).toBe(words(first + second));
        for (const line of lines) {
          const measured = line.spans.reduce((sum, span) => sum + textWidth(span.text, span.style), 0);
          expect(measured).toBeLessThanOrEqual(width + 0.02);
          expect(line.width).toBeCloseTo(measured, 3);
        }
      }),
      { numRuns: 60 },
    );
  });

  it('breaks between words first, and inside a word only where it is wider than the line', () => {
    const width = textWidth('coupled stage', body) + 1;
    const lines = wrapText('coupled stage coupled', body, width).map((line) => line.spans[0]?.text);
    expect(lines).toEqual(['coupled stage', 'coupled']);
    expect(wrapText('WWWW', body, textWidth('WW', body) + 0.1).map((line) => line.spans[0]?.text)).toEqual([
      'WW',
      'WW',
    ]);
    expect(wrapText(' \n ', body, 50)).toEqual([]);
  });

  it('shrinks to the width, but not out of sight', () => {
    const whole = textWidth('H3-0147', body);
    expect(shrinkToFit('H3-0147', body, whole + 1, 6)).toBe(body);
    const half = shrinkToFit('H3-0147', body, whole * 0.7, 6);
    expect(textWidth('H3-0147', half)).toBeCloseTo(whole * 0.7, 3);
    expect(shrinkToFit('H3-0147', body, 1, 6).size).toBe(6);
  });
});

describe('runs', () => {
  it.each([
    ['3.12 W', ['text:3.12 W']],
    ['12 µA', ['text:12 ', 'wide:µ', 'text:A']],
    ['50 Ω −1', ['text:50 Ω −1']],
    ['ηΖ', ['wide:ηΖ']],
    ['a\u202eb\u200fc', ['text:abc']],
    ['a\u0007b', ['text:a[U+0007]b']],
    ['村', ['text:[U+6751]']],
    ['a\tb\nc', ['text:a b c']],
    ['שלום עולם', ['wide:שלום עולם']],
    ['\ud800', ['wide:\ufffd']],
  ])('of %j', (text, runs) => {
    expect(splitRuns(text, 'text').map((run) => `${run.font}:${run.text}`)).toEqual(runs);
  });

  it('stay in the weight of the face where a wider font of that weight has the sign', () => {
    expect(splitRuns('η', 'strong')[0]?.font).toBe('wideStrong');
    expect(splitRuns('η', 'mono')[0]?.font).toBe('wideMono');
  });
});
