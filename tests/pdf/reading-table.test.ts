import { describe, expect, it } from 'vitest';
import { worstBars } from '~/server/pdf/limit-bar';
import { readingTables, ruleSentences } from '~/server/pdf/reading-table';
import { leastWidth } from '~/server/pdf/table';
import { buildBandPoints, buildPoint } from './build-statement';

const WIDTH = 514;
const headings = (points: Parameters<typeof readingTables>[0], width = WIDTH) =>
  readingTables(points, width).map((table) => table.columns.map(({ heading }) => heading));

describe('tables of readings', () => {
  it('have a row a band, a column a quantity, and one column of limits for harmonics held to the same', () => {
    expect(headings(buildBandPoints())).toEqual([
      [
        'Band',
        'Carrier, MHz',
        'Frequency error',
        'Power',
        '2nd harmonic, dBc',
        '3rd harmonic, dBc',
        'Allowed, dBc',
        'Current, key down',
        'Result',
      ],
    ]);
    const [table] = readingTables(buildBandPoints(), WIDTH);
    expect(table?.rows.map(({ cells }) => cells[0])).toMatchObject(
      ['40 m', '30 m', '20 m', 'must be', '±, k = 2'].map((text) => ({
        text: text.replaceAll(' ', '\u00a0'),
      })),
    );
  });

  it('give every reading its limit when the limits of two columns differ', () => {
    const points = [
      buildPoint({ limitText: '≥ 2.4 W' }),
      buildPoint({ quantityKey: 'drop', label: 'Drop', limitText: '≤ 0.3 W' }),
      buildPoint({ band: '30 m', freqHz: 1e7, limitText: '≥ 2.2 W' }),
      buildPoint({ band: '30 m', freqHz: 1e7, quantityKey: 'drop', label: 'Drop', limitText: '≤ 0.2 W' }),
    ];
    expect(headings(points)).toEqual([
      ['Band', 'Carrier, MHz', 'Power', 'Allowed', 'Drop', 'Allowed', 'Result'],
    ]);
  });

  it('are split where the page is too narrow, each with the bands and a result of its own', () => {
    const split = headings(buildBandPoints(), 330);
    expect(split.length).toBeGreaterThan(1);
    for (const columns of split) {
      expect(columns.slice(0, 2)).toEqual(['Band', 'Carrier, MHz']);
      expect(columns.at(-1)).toBe('Result');
    }
  });

  it('lose no point: a second one at the same place, or one without a band, is listed', () => {
    const points = [
      buildPoint({ text: '3.12 W' }),
      buildPoint({ text: '3.05 W', label: 'Power after a minute' }),
      buildPoint({ text: '3.30 W', freqHz: 7_100_000 }),
      buildPoint({ band: null, text: '61 mA' }),
    ];
    const texts = readingTables(points, WIDTH).flatMap((table) => table.rows.flatMap(({ cells }) => cells));
    for (const { text } of points) expect(texts).toContainEqual(expect.objectContaining({ text }));
    expect(texts).toContainEqual({ text: 'Power after a minute, 40 m' });
  });

  it('show the worst verdict of a row, a concession worse than a pass', () => {
    const verdictsOf = (...second: Parameters<typeof buildPoint>) =>
      readingTables(
        [buildPoint(), buildPoint({ quantityKey: 'other', ...second[0] })],
        WIDTH,
      )[0]?.rows[0]?.cells.at(-1);
    expect(verdictsOf({ verdict: 'not_run' })).toEqual({ verdict: 'pass' });
    expect(verdictsOf({ verdict: 'fail', concession: 'Agreed.' })).toEqual({ verdict: 'concession' });
    expect(verdictsOf({ verdict: 'too_close' })).toEqual({ verdict: 'too_close' });
    expect(verdictsOf({ verdict: 'fail' })).toEqual({ verdict: 'fail' });
  });

  it('name the rule of every limit', () => {
    expect(
      ruleSentences([...buildBandPoints(), buildPoint({ ruleText: 'nobody’s', limitText: '' })]),
    ).toEqual([
      'Frequency error; Power; Current, key down: works’ own, as read (w = 0).',
      '2nd harmonic; 3rd harmonic: ITU-R SM.329 category A, guarded (w = U).',
    ]);
  });

  it('say a rule once that asks for another number on each band', () => {
    const rule = (dB: string) => ({
      ...{ label: '2nd harmonic', decision: 'guarded' as const },
      ruleText: `Rule (a): at least ${dB} dB below the fundamental`,
    });
    expect(ruleSentences([rule('50.0'), rule('9.6'), rule('50.0')].map((over) => buildPoint(over)))).toEqual([
      '2nd harmonic: Rule (a): at least 9.6 to 50.0 dB below the fundamental, guarded (w = U).',
    ]);
  });
});

describe('where room is short', () => {
  it('units move into the headings before a table is split', () => {
    const narrow = leastWidth(onlyTable(WIDTH)) - 1;
    const [table, ...others] = readingTables(buildBandPoints(), narrow);
    expect(others).toEqual([]);
    expect(table?.columns.map(({ heading }) => heading)).toContain('Power, W');
    expect(table?.rows[0]?.cells).toContainEqual({ text: '3.12', under: [] });
    expect(readingTables(buildBandPoints(), 300).length).toBeGreaterThan(1);
  });
});

function onlyTable(width: number) {
  const [table] = readingTables(buildBandPoints(), width);
  if (table === undefined) throw new Error('There is no table.');
  return table;
}

describe('limit bars', () => {
  it('show, for each band, the guarded reading nearest to its limit', () => {
    expect(worstBars(buildBandPoints()).map(({ band, point }) => [band, point.text])).toEqual([
      ['40 m', '−54.7 dBc'],
      ['30 m', '−49.2 dBc'],
      ['20 m', '−51.1 dBc'],
    ]);
  });

  it('are not drawn for limits of the works alone', () => {
    expect(worstBars([buildPoint()])).toEqual([]);
  });
});
