import { describe, expect, it } from 'vitest';
import { comparePlans } from './compare-plans';
import { planFaults } from './check-plan';
import { ruleForDestination } from './limit-rules';
import {
  emptyLine,
  isEmptyLine,
  readFrequency,
  readLimit,
  readPlanLine,
  writeLimit,
  writePlanLine,
} from './plan-lines';
import type { PlanLine, PlanPoint } from './plan-lines';
import { previewPlan } from './preview-plan';
import { quantityBook, shippedQuantity } from './quantities';
import type { Quantity } from './quantities';
import type { TestPoint } from './types';

const book = quantityBook();

function quantityOf(key: string): Quantity {
  const quantity = shippedQuantity(key);
  if (quantity === undefined) throw new Error(`${key} does not ship.`);
  return quantity;
}

describe('a limit', () => {
  it.each([
    ['rf_power', '4 W', 4, '4 W'],
    ['rf_power', '500 mW', 0.5, '0.5 W'],
    ['harmonic_2', '-43', -43, '−43'],
    ['harmonic_2', '43', -43, '−43'],
    ['current_key_down', '900 mA', 0.9, '900 mA'],
    ['current_key_down', '1,2 A', 1.2, '1.2 A'],
    ['frequency_error', '−100', -100, '−100 Hz'],
    ['efficiency', '30 %', 0.3, '30 %'],
    ['junction_temperature', '120 °C', 393.15, '120 °C'],
    ['keying_rise', '5 ms', 0.005, '5 ms'],
    ['check', 'yes', 1, 'yes'],
  ])('of %s written %j is %d, and written again %j', (key, text, value, again) => {
    const quantity = quantityOf(key);
    const read = readLimit(text, quantity);
    expect(read).toEqual({ ok: true, value: expect.closeTo(value, 9) as number });
    expect(writeLimit(value, quantity)).toBe(again);
    expect(readLimit(again, quantity)).toEqual(read);
  });

  it.each([
    ['rf_power', '4'],
    ['rf_power', '4 A'],
    ['current_key_down', 'none'],
  ])('of %s is not %j', (key, text) => expect(readLimit(text, quantityOf(key)).ok).toBe(false));
});

it.each([
  ['7030 kHz', 7_030_000],
  ['7030', 7_030_000],
  ['7.030', 7_030_000],
  ['7,03 MHz', 7_030_000],
  ['14060000 Hz', 14_060_000],
])('the frequency %j', (text, freqHz) => expect(readFrequency(text)).toEqual({ ok: true, freqHz }));

it.each(['', 'seven', '-7030', '0'])('%j is no frequency', (text) =>
  expect(readFrequency(text).ok).toBe(false),
);

const power: PlanLine = { ...emptyLine, quantity: 'rf_power', band: '40m', freq: '7030', lower: '4 W' };

describe('a row of the table', () => {
  it('is read into a point, and written as it was', () => {
    const read = readPlanLine(power, book);
    if (!read.ok) throw new Error(JSON.stringify(read.faults));
    const { quantityKey, ...rest } = read.point;
    const line = writePlanLine({ ...rest, id: 1, position: 1, quantity: quantityOf(quantityKey) });
    expect(line).toEqual({ ...power, freq: '7030 kHz' });
    expect(readPlanLine(line, book)).toEqual(read);
  });

  it.each<[Partial<PlanLine>, (keyof PlanLine)[]]>([
    [{ quantity: '' }, ['quantity']],
    [{ quantity: 'nothing' }, ['quantity']],
    [{ band: '41m' }, ['band']],
    [{ freq: 'x', lower: '4 A' }, ['freq', 'lower']],
    [{ upper: '3 W' }, ['upper']],
    [{ limitRule: 'spurious', decision: 'guarded' }, ['limitRule']],
    [{ quantity: 'harmonic_2', lower: '', limitRule: 'spurious' }, ['decision']],
    [{ condition: 'band.40m and' }, ['condition']],
    [{ supply: 'low' }, ['supply']],
    [{ method: 'x'.repeat(201) }, ['method']],
  ])('%j is refused at %j', (changes, fields) => {
    const read = readPlanLine({ ...power, ...changes }, book);
    expect(read.ok ? [] : Object.keys(read.faults)).toEqual(fields);
  });

  it('with nothing in it is no point', () => {
    expect(isEmptyLine(emptyLine)).toBe(true);
    expect(isEmptyLine(power)).toBe(false);
  });
});

function pointOf(changes: Partial<PlanPoint> & { position?: number }): PlanPoint & { position: number } {
  const read = readPlanLine(power, book);
  if (!read.ok) throw new Error('The row is good.');
  return { position: 1, ...read.point, ...changes };
}

const harmonic = {
  ...{ quantityKey: 'harmonic_2', lower: null, upper: null, position: 2 },
  ...({ limitRule: 'spurious', decision: 'guarded' } as const),
};

const option = (key: string) => ({ key, label: key, priceMinor: 0, needs: [], excludes: [] });
const groups = [
  { key: 'bands', label: 'Bands', min: 1, max: 2, options: [option('band.40m'), option('band.20m')] },
  { key: 'filter', label: 'Filter', min: 0, max: 1, options: [option('narrow'), option('wide')] },
];

describe('what is wrong with a plan as a whole', () => {
  const faults = (points: (PlanPoint & { position: number })[], regions: (1 | 2 | 3)[] = [1, 2, 3]) =>
    planFaults({ points, outputStage: null }, book, regions, groups);

  it('nothing, for a power and its harmonic', () => {
    expect(faults([pointOf({}), pointOf(harmonic)])).toEqual([]);
  });

  it.each<[string, (PlanPoint & { position: number })[], RegExp]>([
    ['a frequency outside its band', [pointOf({ freqHz: 7_250_000 })], /outside 40 m in Regions 1 and 3/],
    ['a band without a frequency', [pointOf({ freqHz: null })], /needs its test frequency/],
    ['a point twice', [pointOf({}), pointOf({ position: 2 })], /Point 2 asks the same as point 1\./],
    ['a rule without its power', [pointOf(harmonic)], /add that power/],
    [
      'a power of another band',
      [pointOf({ band: '20m', freqHz: 14_060_000 }), pointOf(harmonic)],
      /add that power/,
    ],
    [
      'a computed quantity without what it needs',
      [pointOf({ quantityKey: 'efficiency', lower: 0.3 })],
      /Efficiency is computed, and lacks Power and Current, key down/,
    ],
    [
      'a junction temperature without the output stage',
      [pointOf({ quantityKey: 'junction_temperature', lower: null, upper: 400 })],
      /thermal resistance/,
    ],
  ])('%s', (_, points, sentence) => expect(faults(points).join(' ')).toMatch(sentence));

  it('not a frequency that is inside wherever the model goes', () => {
    expect(faults([pointOf({ freqHz: 7_250_000 })], [2])).toEqual([]);
  });

  it('not two points that no rig has both', () => {
    const points = [pointOf({ condition: 'narrow' }), pointOf({ condition: 'wide', position: 2 })];
    expect(faults([...points, pointOf({ quantityKey: 'supply_voltage', lower: 13, position: 3 })])).toEqual(
      [],
    );
  });

  it('for one configuration alone, which is named', () => {
    const onlyWith40 = [pointOf({ condition: 'band.40m' }), pointOf({ ...harmonic, condition: null })];
    expect(faults(onlyWith40)).toEqual([
      'Point 2: a limit by rule follows from the power of its band; add that power (with band.20m).',
    ]);
    expect(faults([pointOf({ condition: 'band.40m' })])).toEqual([
      'No point is required of a rig (with band.20m).',
    ]);
  });
});

function testPoint(changes: Partial<PlanPoint>, id = 1): TestPoint {
  const { quantityKey, ...rest } = pointOf(changes);
  return { ...rest, id, position: id, quantity: quantityOf(quantityKey) };
}

it('two revisions are compared point by point', () => {
  const older = [testPoint({}), testPoint(harmonic, 2)];
  const newer = [
    testPoint({ lower: 4.5, freqHz: 7_035_000 }),
    testPoint({ ...harmonic, quantityKey: 'harmonic_3' }, 2),
  ];
  expect(comparePlans(older, newer)).toEqual([
    {
      what: '40 m, power',
      kind: 'changed',
      changes: [
        { field: 'frequency', from: '7.03 MHz', to: '7.035 MHz' },
        { field: 'at least', from: '4 W', to: '4.5 W' },
      ],
    },
    { what: '40 m, 3rd harmonic', kind: 'added', changes: [] },
    { what: '40 m, 2nd harmonic', kind: 'removed', changes: [] },
  ]);
  expect(comparePlans(older, older)).toEqual([]);
});

describe('the preview of a grid', () => {
  const points = [
    testPoint({}),
    testPoint(harmonic, 2),
    testPoint({ ...harmonic, quantityKey: 'spurious' }, 3),
    testPoint({ condition: 'band.20m', band: '20m', freqHz: 14_060_000 }, 4),
  ];
  const seen = (country: string | null, options: string[] = []) => {
    const rule = ruleForDestination(country, '2027-03-09');
    const preview = previewPlan(points, {
      ...{ rule, options: new Set(options), powerW: 5 },
      region: country === 'US' ? 2 : null,
    });
    if (!preview.ok) throw new Error(preview.reason);
    return preview.points;
  };

  it('has the points of the options, with the limits of the destination at the rated power', () => {
    expect(seen('US').map(({ quantity, limit }) => `${quantity}: ${limit}`)).toEqual([
      'Power: at least 4.00 W',
      '2nd harmonic: at most −43.0 dBc',
      'Spurious: at most −43.0 dBc',
    ]);
    expect(seen('US', ['band.20m'])).toHaveLength(4);
  });

  it('names the rule that binds, here category A: 43 + 10 lg 5 W is 50.0 dB', () => {
    expect(seen('DE')[1]).toMatchObject({
      limit: 'at most −50.0 dBc',
      rule: expect.stringMatching(/category A.*guarded$/) as string,
    });
  });

  it('leaves the limit of a product open where it goes by the product’s frequency', () => {
    expect(seen('AT')[2]).toMatchObject({ limit: 'none', problem: null });
  });
});
