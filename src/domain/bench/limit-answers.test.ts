import { expect, it } from 'vitest';
import { answerLimits } from './limit-answers';
import { SHIPPED_RULES } from './shipped-rules';

const ask = (power?: string, tx?: string, product?: string) =>
  answerLimits(SHIPPED_RULES, { power, tx, product });

it('every rule is asked for the same product', () => {
  const answered = ask('5', '7030', '14060 kHz');
  if (answered.kind !== 'answered') throw new Error(answered.kind);
  // 5 W: 43 dB by 47 CFR 97.307(d), 49.99 dB by category A, 40 dB by the Austrian row for 1.7 to 35 MHz.
  expect(answered.answers.map(({ key, limit }) => [key, limit])).toEqual([
    ['us_97_307', '−43.0 dBc'],
    ['itu_category_a', '−50.0 dBc'],
    ['at_afv_17', '−40.0 dBc'],
    ['us_97_307_before_2003', '−40.0 dBc'],
  ]);
  expect(answered.answers[0]?.level).toBe('−6.01 dBm, 251 µW');
});

it('a rule by the product says nothing without its frequency', () => {
  const answered = ask('5 W', '7.030 MHz');
  if (answered.kind !== 'answered') throw new Error(answered.kind);
  expect(answered.answers[2]).toMatchObject({ key: 'at_afv_17', limit: null });
});

it.each([
  [['x', '7030'], ['power']],
  [
    ['5', 'x', 'y'],
    ['tx', 'product'],
  ],
])('%j is not read at %j', (texts, fields) => {
  const [power, tx, product] = texts;
  const answered = ask(power, tx, product);
  expect(answered.kind === 'not_read' ? Object.keys(answered.faults) : []).toEqual(fields);
});

it('nothing is asked before there is a power', () => expect(ask().kind).toBe('not_asked'));
