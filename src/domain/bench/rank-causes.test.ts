import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { BACK_OFF_CASES, causeKey, rankCauses } from './rank-causes';
import type { MendedCase, Symptom } from './rank-causes';
import { usualSuspects } from './usual-suspects';

const second: Symptom = { modelId: 1, band: '20m', quantityKey: 'harmonic_2', direction: 'over' };
const turns = 'Low-pass coil has a wrong number of turns';

function mended(cause: string, symptom: Partial<Symptom> = {}, more: Partial<MendedCase> = {}): MendedCase {
  return { cause, remedy: null, minutes: null, symptoms: [{ ...second, ...symptom }], ...more };
}

function of(cause: string, ranked: ReturnType<typeof rankCauses>) {
  const found = ranked.find((each) => causeKey(each.cause) === causeKey(cause));
  if (found === undefined) throw new Error(`${cause} is not ranked.`);
  return found;
}

describe('without a history', () => {
  it('gives the usual suspects by their weights, as common practice', () => {
    const ranked = rankCauses([second], []);
    const weights = usualSuspects('harmonic_2', 'over');
    expect(ranked[0]).toMatchObject({ cause: turns, isUsual: true, counted: null, remedies: [] });
    // Nothing is counted at any level, so each share is that of the weights: 3 of 10.
    expect(ranked[0]?.share).toBeCloseTo(3 / weights.reduce((sum, { weight }) => sum + weight, 0), 12);
    expect(ranked).toHaveLength(weights.length);
    expect(ranked[0]?.look).toContain('Count the turns');
  });

  it('names nothing for a quantity that nobody suspects anything of', () => {
    expect(rankCauses([{ ...second, quantityKey: 'own_click' }], [])).toEqual([]);
  });

  it('adds the suspects of all points that failed', () => {
    const power: Symptom = { ...second, quantityKey: 'rf_power', direction: 'under' };
    const ranked = rankCauses([second, power], []);
    // 3 of 10 at the harmonic and 2 of 10 at the power, averaged.
    expect(of(turns, ranked).share).toBeCloseTo((0.3 + 0.2) / 2, 12);
    expect(ranked[0]?.cause).toBe(turns);
  });
});

describe('with a history', () => {
  it('smooths each level by the one behind, with a weight of four cases', () => {
    const m = BACK_OFF_CASES;
    const cases = [
      mended('Relay of the filter is stuck'),
      mended('Relay of the filter is stuck'),
      mended(turns, { band: '40m' }),
      mended(turns, { modelId: 2 }),
    ];
    const ranked = rankCauses([second], cases);
    const share = (band: number, model: number, any: number, prior: number) => {
      const pAny = (any + m * prior) / (4 + m);
      const pModel = (model + m * pAny) / (3 + m);
      return (band + m * pModel) / (2 + m);
    };
    expect(of(turns, ranked).share).toBeCloseTo(share(0, 1, 2, 0.3), 12);
    expect(of('Relay of the filter is stuck', ranked).share).toBeCloseTo(share(2, 2, 2, 0), 12);
    expect(ranked[0]?.cause).toBe('Relay of the filter is stuck');
  });

  it('counts at the nearest level that has any', () => {
    const near = [mended(turns), mended(turns), mended('A capacitor was cracked')];
    expect(of(turns, rankCauses([second], near)).counted).toEqual({ n: 2, of: 3, nearness: 'band' });
    const onOther = near.map((each) => ({ ...each, symptoms: [{ ...second, band: '40m' as const }] }));
    expect(of(turns, rankCauses([second], onOther)).counted).toEqual({ n: 2, of: 3, nearness: 'model' });
    const ofOther = near.map((each) => ({ ...each, symptoms: [{ ...second, modelId: 9 }] }));
    expect(of(turns, rankCauses([second], ofOther)).counted).toEqual({ n: 2, of: 3, nearness: 'any' });
    expect(of('Output stage oscillates', rankCauses([second], near)).counted).toMatchObject({ n: 0, of: 3 });
  });

  it('takes no case of another quantity or the other direction', () => {
    const cases = [
      mended('Supply was at 11 V', { quantityKey: 'rf_power' }),
      mended('Filter of another rig', { direction: 'under' }),
    ];
    const ranked = rankCauses([second], cases);
    expect(ranked.map(({ cause }) => cause)).not.toContain('Supply was at 11 V');
    expect(ranked.every(({ counted }) => counted === null)).toBe(true);
  });

  it('takes one cause for one, however it was typed, under the name of the first', () => {
    const ranked = rankCauses([second], [mended('Relay stuck'), mended('  relay  STUCK. ')]);
    expect(of('relay stuck', ranked)).toMatchObject({ cause: 'Relay stuck', counted: { n: 2, of: 2 } });
  });

  it('tells what helped, most often first, and how long it takes', () => {
    const helped = (remedy: string, minutes: number | null) => mended(turns, {}, { remedy, minutes });
    const cases = [helped('L7 rewound', 20), helped('L8 rewound', 40), helped('L8 rewound', null)];
    expect(of(turns, rankCauses([second], cases))).toMatchObject({
      remedies: ['L8 rewound', 'L7 rewound'],
      minutes: 30,
    });
  });
});

describe('laws of the ranking', () => {
  const causes = [turns, 'Output stage oscillates', 'Relay stuck', 'Cracked capacitor'];
  const symptom = fc.record({
    modelId: fc.constantFrom(1, 2),
    band: fc.constantFrom<(typeof second)['band'][]>('20m', '40m', null),
    quantityKey: fc.constantFrom('harmonic_2', 'rf_power', 'own_click'),
    direction: fc.constantFrom<(typeof second)['direction'][]>('over', 'under'),
  });
  const history = fc.array(
    fc.record({
      cause: fc.constantFrom(...causes),
      remedy: fc.constant(null),
      minutes: fc.constant(null),
      symptoms: fc.array(symptom, { minLength: 1, maxLength: 3 }),
    }),
    { maxLength: 20 },
  );
  const seen = fc.array(symptom, { minLength: 1, maxLength: 3 });

  it('shares lie between 0 and 1 and sum to at most 1', () => {
    fc.assert(
      fc.property(seen, history, (symptoms, cases) => {
        const shares = rankCauses(symptoms, cases).map(({ share }) => share);
        expect(shares.every((share) => share > 0 && share <= 1)).toBe(true);
        expect(shares.reduce((sum, share) => sum + share, 0)).toBeLessThanOrEqual(1 + 1e-9);
      }),
    );
  });

  it('they sum to 1 where every point has its suspects', () => {
    const known = fc.array(
      symptom.map((each): Symptom => ({ ...each, quantityKey: 'rf_power' })),
      { minLength: 1, maxLength: 3 },
    );
    fc.assert(
      fc.property(known, history, (symptoms, cases) => {
        const sum = rankCauses(symptoms, cases).reduce((total, { share }) => total + share, 0);
        expect(sum).toBeCloseTo(1, 9);
      }),
    );
  });

  it('one more confirmed case of a cause never lowers its place', () => {
    fc.assert(
      fc.property(
        seen,
        history,
        fc.constantFrom(...causes),
        fc.array(symptom, { minLength: 1, maxLength: 2 }),
        (symptoms, cases, cause, symptomsOfCase) => {
          const place = (all: MendedCase[]) => {
            const at = rankCauses(symptoms, all).findIndex((each) => each.cause === cause);
            return at < 0 ? Infinity : at;
          };
          const more = { cause, remedy: null, minutes: null, symptoms: symptomsOfCase };
          expect(place([...cases, more])).toBeLessThanOrEqual(place(cases));
        },
      ),
    );
  });

  it('the order of the cases changes nothing', () => {
    fc.assert(
      fc.property(seen, history, (symptoms, cases) => {
        const bare = (all: MendedCase[]) =>
          rankCauses(symptoms, all).map(({ cause, share }) => [cause, Math.round(share * 1e9)]);
        expect(bare([...cases].reverse())).toEqual(bare(cases));
      }),
    );
  });
});
