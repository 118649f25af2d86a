import { describe, expect, it } from 'vitest';
import { NOTHING_READ } from '~/domain/bench/judge-point';
import { ruleByKey, ruleForDestination } from '~/domain/bench/limit-rules';
import { shippedQuantity } from '~/domain/bench/quantities';
import type { BandKey, TestPoint, Verdict } from '~/domain/bench/types';
import { writeConformity, writeNotAssessed } from './write-conformity';
import type { ConformityFacts } from './write-conformity';
import type { JudgedPoint } from './write-statement';

function point(key: string, band: BandKey | null): TestPoint {
  const quantity = shippedQuantity(key);
  if (quantity === undefined) throw new Error(`There is no ${key}.`);
  const isLegal = quantity.order !== null || key === 'spurious';
  return {
    ...{ id: 1, position: 1, quantity, band, freqHz: 7_030_000, lower: null, upper: null, required: true },
    limitRule: isLegal ? 'spurious' : 'fixed',
    decision: isLegal ? 'guarded' : 'simple',
    ...{ condition: null, supplyV: null, method: '' },
  };
}

function judged(
  key: string,
  band: BandKey | null,
  verdict: Verdict = 'pass',
  concession: string | null = null,
): JudgedPoint {
  return { point: point(key, band), judgement: { ...NOTHING_READ, value: 1, verdict }, concession };
}

function facts(points: JudgedPoint[], change: Partial<ConformityFacts> = {}): ConformityFacts {
  const rule = ruleForDestination('US', '2027-03-09');
  return { points, unread: [], spans: [], rule, destinationCountry: 'US', ...change };
}

const orders = (band: BandKey, ...list: number[]) => list.map((order) => judged(`harmonic_${order}`, band));

describe('what is stated as met', () => {
  it('names the harmonics, the bands, the rule and the destination', () => {
    expect(writeConformity(facts([...orders('40m', 2, 3), ...orders('20m', 2, 3)]))).toEqual([
      'On 40 m and 20 m the 2nd and 3rd harmonic are each inside 47 CFR 97.307(d), (e) (47 CFR 97.307) ' +
        'at the measured power by more than its expanded uncertainty, for the destination US.',
    ]);
  });

  it('claims for no band more than was read on it', () => {
    const [sentence] = writeConformity(
      facts([...orders('40m', 2, 3, 4, 5, 6, 7), ...orders('30m', 2, 3, 5), ...orders('10m', 2)]),
    );
    expect(sentence).toContain(
      'On 40 m the 2nd to 7th harmonic, on 30 m the 2nd, 3rd and 5th harmonic and on 10 m the 2nd harmonic are each',
    );
  });

  it('names other products with the span in which they were looked for', () => {
    const spans = [{ band: '40m' as const, fromHz: 1e6, toHz: 150e6 }];
    const points = [...orders('40m', 2), judged('spurious', '40m')];
    expect(writeConformity(facts(points, { spans }))).toEqual([
      expect.stringContaining('On 40 m the 2nd harmonic and the strongest other product are each inside'),
      'Other products were looked for in the sweep from 1 to 150 MHz on 40 m.',
    ]);
    // A sweep that was read for its harmonics alone says nothing of other products.
    expect(writeConformity(facts(orders('40m', 2), { spans }))).toHaveLength(1);
  });

  it('says so for the works’ own limits, and on which bands where not on all', () => {
    const points = [
      judged('rf_power', '40m'),
      judged('rf_power', '20m', 'fail', 'Agreed with the buyer.'),
      judged('current_key_down', '40m'),
    ];
    expect(writeConformity(facts(points))).toEqual([
      'The power on 40 m and current key down are inside the works’ own limits.',
      'Not met, and let go by concession of the owner: Power, 20 m.',
    ]);
  });

  it('does not pass over what is too close to call, or claim anything where nothing was judged', () => {
    const close = [...orders('40m', 2), judged('harmonic_3', '40m', 'too_close')];
    expect(writeConformity(facts(close)).at(-1)).toBe('Not stated as met: 3rd harmonic, 40 m.');
    expect(writeConformity(facts([judged('rf_power', '40m', 'not_run')]))).toEqual([
      expect.stringContaining('Nothing is stated as met'),
    ]);
  });

  it('says for whom where there is no buyer', () => {
    const rule = ruleForDestination(null, '2027-03-09');
    const [sentence] = writeConformity(facts(orders('40m', 2), { rule, destinationCountry: null }));
    expect(sentence).toMatch(/is inside The strictest .* for a unit without a buyer\.$/u);
  });
});

describe('what is stated as not assessed', () => {
  it('harmonics above the highest, on each band, and other products', () => {
    expect(writeNotAssessed(facts(orders('40m', 2, 3)))).toEqual([
      'Harmonics above the 3rd were not assessed.',
      'Products other than the harmonics named were not assessed.',
    ]);
    expect(writeNotAssessed(facts([...orders('40m', 2, 3), ...orders('10m', 2)]))[0]).toBe(
      'Harmonics above the 3rd on 40 m and above the 2nd on 10 m were not assessed.',
    );
    expect(writeNotAssessed(facts([judged('rf_power', '40m')]))).toEqual(['Emissions were not assessed.']);
  });

  it.each([
    ['DE', true],
    ['GB', true],
    ['NO', true],
    [null, true],
    ['US', false],
    ['JP', false],
  ])('EN 301 783 for Europe, and for a unit that may still go there: %s', (destinationCountry, isSaid) => {
    const said = writeNotAssessed(facts(orders('40m', 2), { destinationCountry }));
    expect(said.includes('Not assessed to EN 301 783.')).toBe(isSaid);
  });

  it('what was not measured, has no limit, or could not be judged', () => {
    const stopped = judged('harmonic_2', '40m', 'not_run');
    const said = writeNotAssessed(
      facts(
        [
          { ...stopped, judgement: { ...stopped.judgement, stopped: 'The calibration is overdue.' } },
          judged('case_temperature', null, 'not_run'),
        ],
        { unread: [point('sensitivity', '40m')] },
      ),
    );
    expect(said).toContain('Not measured: Sensitivity, 40 m.');
    expect(said).toContain('For information, without a limit: Case temperature after key-down.');
    expect(said).toContain('Read, but not judged: 2nd harmonic, 40 m.');
  });

  it('how sure the text of a rule is, where it was not read', () => {
    const key = 'itu_category_a';
    const rule = ruleByKey(key) ?? ruleForDestination('JP', '2027-03-09');
    const unsure = rule.rules.filter(({ certainty }) => certainty !== 'read');
    expect(unsure.length).toBeGreaterThan(0);
    for (const { title } of unsure) {
      expect(writeNotAssessed(facts(orders('40m', 2), { rule })).join(' ')).toContain(
        `The text of ${title} was taken`,
      );
    }
    const read = ruleForDestination('US', '2027-03-09');
    expect(writeNotAssessed(facts(orders('40m', 2), { rule: read })).join(' ')).not.toContain('was taken');
  });
});
