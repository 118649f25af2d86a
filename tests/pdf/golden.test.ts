import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it, vi } from 'vitest';
import { buildBandPoints } from './build-statement';
import { differingPixels, readPng, writePng } from './grey-picture';
import type { GreyPicture } from './grey-picture';
import { renderStatement } from './render-statement';
import { pictureOf } from './tools';

vi.setConfig({ testTimeout: 60_000 });

// The page that is right, in grey: it is looked at before it is committed. After a change that is meant, renew it by
// RENEW_GOLDEN=1 npx vitest run tests/pdf/golden.test.ts and look at it again.
const GOLDEN = 'tests/pdf/golden/certificate.png';
const FOLDER = '.build/golden';
const DPI = 100;
/** Shades of grey within which smoothing may differ. */
const TOLERANCE = 80;
/** A changed digit is more than this. */
const MOST_PIXELS = 8;

function compare(now: GreyPicture, golden: GreyPicture): Set<number> {
  expect([now.width, now.height]).toEqual([golden.width, golden.height]);
  return differingPixels(now, golden, TOLERANCE);
}

/** Leaves the page as it is now, and what differs in black on its paler self, for somebody to look at. */
function leavePictures(now: GreyPicture, differing: ReadonlySet<number>): string {
  mkdirSync(FOLDER, { recursive: true });
  const pixels = now.pixels.map((value, at) => (differing.has(at) ? 0 : 200 + Math.round(value * 0.2)));
  const difference = join(FOLDER, 'difference.png');
  writeFileSync(join(FOLDER, 'now.png'), writePng(now));
  writeFileSync(difference, writePng({ ...now, pixels }));
  return difference;
}

describe('the page of the certificate', () => {
  it('looks as it did when somebody last looked at it', async () => {
    const now = pictureOf(await renderStatement(), DPI);
    if (process.env['RENEW_GOLDEN'] === '1' || !existsSync(GOLDEN)) {
      expect(process.env['RENEW_GOLDEN']).toBe('1');
      writeFileSync(GOLDEN, writePng(now));
    }
    const differing = compare(now, readPng(readFileSync(GOLDEN)));
    const where = differing.size > MOST_PIXELS ? leavePictures(now, differing) : '';
    expect(differing.size, `look at ${where}`).toBeLessThanOrEqual(MOST_PIXELS);
  });

  it.each([
    ['one digit', { points: withPower('3.17 W') }],
    ['one letter', { testedBy: 'Inez Aldous' }],
    ['one word', { letter: 'A' }],
  ])('shows when %s has changed', async (_, over) => {
    const now = pictureOf(await renderStatement(over), DPI);
    expect(compare(now, readPng(readFileSync(GOLDEN))).size).toBeGreaterThan(MOST_PIXELS);
  });

  it('can be read in black and white: each verdict has its own shape', async () => {
    const picture = async (verdict: 'pass' | 'too_close' | 'fail') =>
      pictureOf(
        await renderStatement({ points: buildBandPoints().map((point) => ({ ...point, verdict })) }),
        DPI,
      );
    const [pass, close, fail] = [await picture('pass'), await picture('too_close'), await picture('fail')];
    // Only what is black or white is left, as a poor copier would.
    const copied = (from: GreyPicture) => ({ ...from, pixels: from.pixels.map((v) => (v < 128 ? 0 : 255)) });
    for (const [a, b] of [
      [pass, close],
      [pass, fail],
      [close, fail],
    ] as const) {
      expect(compare(copied(a), copied(b)).size).toBeGreaterThan(MOST_PIXELS);
    }
  });
});

function withPower(text: string) {
  return buildBandPoints().map((point, at) => (at === 1 ? { ...point, text } : point));
}
