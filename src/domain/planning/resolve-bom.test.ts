import { describe, expect, it } from 'vitest';
import type { OptionGroup } from './configuration';
import type { BomLine } from './resolve-bom';
import { checkBom, resolveBom } from './resolve-bom';

const line = (lineNo: number, designators: string[], condition: string | null = null): BomLine => ({
  id: 100 + lineNo,
  lineNo,
  partId: 200 + lineNo,
  quantity: Math.max(1, designators.length),
  designators,
  condition,
  scrapPercent: 0,
});

const group = (key: string, min: number, max: number, options: string[]): OptionGroup => ({
  key,
  label: key,
  min,
  max,
  options: options.map((o) => ({ key: o, label: o, priceMinor: 0, needs: [], excludes: [] })),
});

const bands = group('bands', 3, 3, ['band.40m', 'band.30m', 'band.20m', 'band.15m']);
const filter = group('filter', 0, 1, ['filter.narrow']);
const groups = [bands, filter];

const lines = [
  line(10, ['R1', 'R2']),
  line(20, ['L7'], 'band.20m'),
  line(30, ['X1', 'X2', 'X3', 'X4'], 'filter.narrow'),
  line(40, ['X1', 'X2'], 'not filter.narrow'),
  line(50, []),
];

describe('resolving', () => {
  it('takes the lines whose condition holds', () => {
    const result = resolveBom(lines, new Set(['band.20m']));
    expect(result.ok && result.lines.map((l) => [l.lineNo, l.partId, l.quantity, l.designators])).toEqual([
      [10, 210, 2, ['R1', 'R2']],
      [20, 220, 1, ['L7']],
      [40, 240, 2, ['X1', 'X2']],
      [50, 250, 1, []],
    ]);
    const narrow = resolveBom(lines, new Set(['filter.narrow']));
    expect(narrow.ok && narrow.lines.map((l) => l.lineNo)).toEqual([10, 30, 50]);
  });

  it('gives the lines in order of their numbers', () => {
    const result = resolveBom([line(3, ['R3']), line(1, ['R1']), line(2, ['R2'])], new Set());
    expect(result.ok && result.lines.map((l) => l.lineNo)).toEqual([1, 2, 3]);
  });

  it('refuses a place filled twice and names both lines', () => {
    expect(resolveBom([...lines, line(60, ['R2'], 'band.20m')], new Set(['band.20m']))).toEqual({
      ok: false,
      reasons: ['R2 is filled twice, by line 10 and line 60.'],
    });
  });

  it('refuses a place that one line names twice', () => {
    expect(resolveBom([line(1, ['R1', 'R1'])], new Set())).toMatchObject({ ok: false });
  });

  it('refuses a condition it cannot read', () => {
    expect(resolveBom([line(5, ['R1'], 'band.20m or')], new Set())).toEqual({
      ok: false,
      reasons: ['Line 5, condition “band.20m or”: An option is missing at the end.'],
    });
  });
});

describe('the check at release', () => {
  it('tries every allowed combination that matters', () => {
    expect(checkBom(lines, groups)).toEqual({ ok: true, combinations: 8, complete: true });
    const unrelated = group('leads', 0, 3, ['lead.a', 'lead.b', 'lead.c']);
    expect(checkBom(lines, [...groups, unrelated])).toEqual({ ok: true, combinations: 8, complete: true });
  });

  it('finds the one combination that fills a place twice', () => {
    const faulty = [...lines, line(60, ['L7'], 'band.15m and band.30m')];
    expect(checkBom(faulty, groups)).toEqual({
      ok: false,
      reasons: [
        'With band.30m, band.20m, band.15m, filter.narrow: L7 is filled twice, by line 20 and line 60.',
        'With band.30m, band.20m, band.15m: L7 is filled twice, by line 20 and line 60.',
      ],
    });
  });

  it('leaves out what the rules of the options forbid', () => {
    const apart: OptionGroup = {
      ...group('filter', 0, 2, ['filter.narrow', 'filter.wide']),
    };
    const both = [line(1, ['X1'], 'filter.narrow'), line(2, ['X1'], 'filter.wide')];
    expect(checkBom(both, [apart])).toMatchObject({ ok: false });
    const [narrow, wide] = apart.options;
    if (!narrow || !wide) throw new Error('two options are needed');
    const ruled = { ...apart, options: [{ ...narrow, excludes: ['filter.wide'] }, wide] };
    expect(checkBom(both, [ruled])).toEqual({ ok: true, combinations: 3, complete: true });
  });

  it('minds rules of other groups, which may forbid what the conditions name', () => {
    const both = [line(1, ['X1'], 'filter.narrow'), line(2, ['X1'], 'filter.wide')];
    const filters = group('filter', 0, 2, ['filter.narrow', 'filter.wide']);
    const ruledBy = (rule: Partial<OptionGroup['options'][number]>): OptionGroup => {
      const board = group('board', 1, 1, ['board.b']);
      return { ...board, options: board.options.map((option) => ({ ...option, ...rule })) };
    };
    expect(checkBom(both, [filters, ruledBy({})])).toMatchObject({ ok: false });
    expect(checkBom(both, [filters, ruledBy({ excludes: ['filter.wide'] })])).toEqual({
      ok: true,
      combinations: 2,
      complete: true,
    });
    expect(checkBom(both, [filters, ruledBy({ needs: ['filter.wide'] })])).toMatchObject({ ok: false });
  });

  it('finds a required place left empty', () => {
    const result = checkBom(lines, groups, ['L7', 'R1', 'X1']);
    expect(result).toEqual({
      ok: false,
      reasons: [
        'With band.40m, band.30m, band.15m, filter.narrow: L7 stays empty.',
        'With band.40m, band.30m, band.15m: L7 stays empty.',
      ],
    });
  });

  it('refuses an option that the model does not have', () => {
    expect(checkBom([line(7, ['R1'], 'band.6m')], groups)).toEqual({
      ok: false,
      reasons: ['Line 7: the model has no option “band.6m”.'],
    });
  });

  it('refuses rules that allow nothing', () => {
    const impossible = group('bands', 3, 3, ['band.40m']);
    expect(checkBom([line(1, ['L1'], 'band.40m')], [impossible])).toMatchObject({ ok: false });
  });

  it('says so when there are more combinations than it tries', () => {
    const wide = group(
      'wide',
      0,
      16,
      Array.from({ length: 16 }, (_, i) => `o.${i}`),
    );
    expect(checkBom([line(1, ['R1'], 'o.0')], [wide])).toMatchObject({ ok: true, complete: false });
  });
});
