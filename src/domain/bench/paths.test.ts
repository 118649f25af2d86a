import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkPathPower, partLoss, pathLoss } from './paths';
import type { PathPart } from './types';

const part = (over: Partial<PathPart> = {}): PathPart => ({
  partNumber: null,
  name: 'Tap',
  loss: [
    [1e6, 40],
    [10e6, 40.4],
    [100e6, 41.4],
  ],
  uncertaintyDb: 0.2,
  k: 2,
  flatnessDb: null,
  ratingW: null,
  vswr: null,
  ...over,
});

/** The sentence of a refusal; empty where it is none. */
const reasonOf = (result: { ok: true } | { ok: false; reason: string }): string =>
  result.ok ? '' : result.reason;

describe('partLoss', () => {
  it.each([
    [1e6, 40],
    [10e6, 40.4],
    [100e6, 41.4],
    [Math.sqrt(10) * 1e6, 40.2], // half way in log frequency
    [Math.sqrt(1000) * 1e6, 40.9],
  ])('at %d Hz is %d dB', (freqHz, lossDb) => {
    const loss = partLoss(part(), freqHz);
    expect(loss.ok && loss.lossDb).toBeCloseTo(lossDb, 9);
  });

  it.each([0.99e6, 100.1e6, NaN])('refuses to guess at %d Hz', (freqHz) => {
    expect(reasonOf(partLoss(part(), freqHz))).toMatch('1 MHz to 100 MHz');
  });

  it('stays between the rows around it', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e6, max: 100e6, noNaN: true }), (freqHz) => {
        const loss = partLoss(part(), freqHz);
        return loss.ok && loss.lossDb >= 40 && loss.lossDb <= 41.4;
      }),
    );
  });
});

describe('pathLoss', () => {
  it('adds its parts and loses nothing without any', () => {
    expect(pathLoss({ direction: 'to_instrument', parts: [part(), part()] }, 10e6)).toEqual({
      ok: true,
      lossDb: 80.8,
    });
    expect(pathLoss(null, 10e6)).toEqual({ ok: true, lossDb: 0 });
  });

  it('refuses where one part does', () => {
    const short = part({
      partNumber: null,
      name: 'Pad',
      loss: [
        [1e6, 10],
        [5e6, 10],
      ],
    });
    expect(reasonOf(pathLoss({ direction: 'to_instrument', parts: [part(), short] }, 10e6))).toMatch('Pad');
  });
});

describe('checkPathPower', () => {
  const load = part({ name: 'Load tap', ratingW: 10 });
  const pad = part({
    name: 'Pad',
    ratingW: 0.5,
    loss: [
      [1e6, 20],
      [60e6, 20],
    ],
  });

  it('passes a path that stands the power', () => {
    expect(checkPathPower({ direction: 'to_instrument', parts: [load, pad] }, 5, 7e6)).toEqual({ ok: true });
  });

  it('names the part that would burn', () => {
    const result = checkPathPower({ direction: 'to_instrument', parts: [pad, load] }, 5, 7e6);
    expect(reasonOf(result)).toMatch(/Pad is rated for 0\.500 W and would get 5\.00 W/);
  });

  it('looks behind a part that loses little', () => {
    const cable = part({
      partNumber: null,
      name: 'Cable',
      loss: [
        [1e6, 0.1],
        [60e6, 0.3],
      ],
    });
    expect(checkPathPower({ direction: 'to_instrument', parts: [cable, pad] }, 5, 7e6)).toMatchObject({
      ok: false,
    });
  });
});
