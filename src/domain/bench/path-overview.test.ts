import { describe, expect, it } from 'vitest';
import { bandLosses, modelPowers } from './path-overview';
import type { PathPart, PathSpec } from './types';

const part = (change: Partial<PathPart> = {}): PathPart => ({
  ...{ partNumber: 'A-1', name: 'Pad', uncertaintyDb: 0.1, k: 2, flatnessDb: null, ratingW: 2, vswr: null },
  loss: [
    [1e6, 10],
    [30e6, 10],
  ],
  ...change,
});
const path = (...parts: PathPart[]): PathSpec => ({ direction: 'to_instrument', parts });

describe('a path at a glance', () => {
  it('says the loss in the middle of each band, and where a part refuses to guess', () => {
    const losses = bandLosses(path(part(), part()));
    expect(losses.find(({ band }) => band === '20m')).toMatchObject({ text: '20.00 dB', isKnown: true });
    expect(losses.find(({ band }) => band === '6m')).toMatchObject({ isKnown: false });
    expect(losses).toHaveLength(11);
  });

  it('says for each model whether its power is stood, and which part would burn', () => {
    const models = [
      { name: 'Holm', ratedPowerW: 5 },
      { name: 'Voe', ratedPowerW: 1 },
    ];
    const [holm, voe] = modelPowers(path(part()), models);
    expect(holm?.stands).toBe(false);
    expect(holm?.text).toMatch(/Pad is rated for 2\.00 W/);
    expect(voe).toEqual({ name: 'Voe', stands: true, text: 'Stands 1.00 W.' });
    expect(modelPowers(path(part({ ratingW: null })), models)[0]?.text).toMatch(/No part states/);
  });
});
