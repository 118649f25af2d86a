import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Condition } from './condition';
import { evaluateCondition, keysOf, parseCondition } from './condition';

function holds(text: string, ...chosen: string[]): boolean {
  const parsed = parseCondition(text);
  if (!parsed.ok) throw new Error(parsed.reason);
  return evaluateCondition(parsed.ast, new Set(chosen));
}

describe('a condition', () => {
  it.each([
    ['band.20m', ['band.20m'], true],
    ['band.20m', ['band.30m'], false],
    ['band.20m and not filter.narrow', ['band.20m'], true],
    ['band.20m and not filter.narrow', ['band.20m', 'filter.narrow'], false],
    ['a or b and c', ['a'], true],
    ['(a or b) and c', ['a'], false],
    ['(a or b) and c', ['b', 'c'], true],
    ['not a and b', ['b'], true],
    ['not (a and b)', ['b'], true],
    ['not not a', ['a'], true],
    ['A OR b', ['b'], true],
    ['  keyer.built-in  ', ['keyer.built-in'], true],
    ['NOT a AND(b)', ['b'], true],
  ])('%j with %j is %s', (text, chosen, expected) => {
    expect(holds(text, ...chosen)).toBe(expected);
  });

  it.each([
    ['', 'The condition is empty.', 0],
    ['   ', 'The condition is empty.', 0],
    ['a and', 'An option is missing at the end.', 5],
    ['and a', 'An option is missing before “and”.', 0],
    ['a b', '“and” or “or” is missing before “b”.', 2],
    ['(a or b', 'A parenthesis is opened and not closed.', 0],
    ['a)', 'A parenthesis is closed that was never opened.', 1],
    ['a & b', '“&” cannot stand in a condition.', 2],
    ['()', 'An option is missing before “)”.', 1],
  ])('%j is refused', (text, reason, at) => {
    expect(parseCondition(text)).toEqual({ ok: false, reason, at });
  });

  it('names its keys', () => {
    const parsed = parseCondition('a and (not b or a) and c.d');
    expect(parsed.ok && [...keysOf(parsed.ast)].sort()).toEqual(['a', 'b', 'c.d']);
  });

  it('is read back as it was written, with parentheses everywhere', () => {
    const { tree } = fc.letrec<{ tree: Condition }>((tie) => ({
      tree: fc.oneof(
        { maxDepth: 4 },
        fc.record({ kind: fc.constant('key' as const), key: fc.constantFrom('a', 'b.c', 'd-4') }),
        fc.record({ kind: fc.constant('not' as const), of: tie('tree') }),
        fc.record({
          kind: fc.constantFrom('and' as const, 'or' as const),
          left: tie('tree'),
          right: tie('tree'),
        }),
      ),
    }));
    const write = (c: Condition): string => {
      if (c.kind === 'key') return c.key;
      return c.kind === 'not' ? `not (${write(c.of)})` : `(${write(c.left)}) ${c.kind} (${write(c.right)})`;
    };
    fc.assert(
      fc.property(tree, (ast) => {
        const text = write(ast);
        fc.pre(text.length <= 1000);
        expect(parseCondition(text)).toEqual({ ok: true, ast });
      }),
    );
  });
});
