import { expect, it } from 'vitest';
import { bandOption } from '~/domain/bench/plan-template';
import { litParts } from './panel';
import { plainPanel, serialPrefixOf, slugOf } from './plain-model';

it.each([
  ['Holm 3', 'holm-3', 'H3'],
  ['Skerry 5 · CW', 'skerry-5-cw', 'S5C'],
  ['Käfer QT40', 'kafer-qt40', 'KQT40'],
  ['  a  ', 'a', 'A'],
  ['…', '', ''],
])('%j is at %j and numbered %j', (name, slug, prefix) => {
  expect(slugOf(name)).toBe(slug);
  expect(serialPrefixOf(name)).toBe(prefix);
});

it('a plain panel lights the bands that every rig has, and the chosen ones where they vary', () => {
  const lit = (bandsVary: boolean) =>
    litParts(plainPanel('Holm 3', ['40m', '20m'], bandsVary), new Set([bandOption('20m')])).lit;
  expect([...lit(false)]).toEqual([bandOption('40m'), bandOption('20m')]);
  expect([...lit(true)]).toEqual([bandOption('20m')]);
});
