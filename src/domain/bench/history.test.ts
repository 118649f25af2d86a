import { describe, expect, it } from 'vitest';
import { guessColumn, mostHistoryRows, readDay, readHistory } from './history';
import { quantityBook } from './quantities';

const book = quantityBook();
const table = (text: string) => text.split('\n').map((line) => line.split('\t'));

describe('a heading', () => {
  it.each([
    ['Serial', 'serial', '', ''],
    ['S/N', 'serial', '', ''],
    ['Date tested', 'date', '', ''],
    ['40 m power [W]', 'rf_power', '40m', 'W'],
    ['Power 20m (dBm)', 'rf_power', '20m', 'dBm'],
    ['20m 2nd harmonic', 'harmonic_2', '20m', ''],
    ['40m_H3 dBc', 'harmonic_3', '40m', 'dBc'],
    ['Key down mA', 'current_key_down', '', 'mA'],
    ['RX current (mA)', 'current_rest', '', 'mA'],
    ['Remarks', '', '', ''],
  ])('%j is %s', (heading, meaning, band, unit) => {
    expect(guessColumn(heading, book)).toEqual({ meaning, band, unit });
  });
});

describe('a day', () => {
  it.each([
    ['2019-03-09', '2019-03-09'],
    ['9.3.2019', '2019-03-09'],
    ['25/3/2019', '2019-03-25'],
    ['3/25/2019', '2019-03-25'],
    ['5/5/2019', '2019-05-05'],
    ['', null],
  ])('%j', (text, day) => expect(readDay(text)).toEqual({ ok: true, day }));

  it.each(['3/9/2019', '2019-02-30', 'spring', '=TODAY()'])('%j is not read', (text) =>
    expect(readDay(text).ok).toBe(false),
  );
});

const pasted = table(
  [
    'Serial\tDate\t40 m power [W]\t40 m 2nd\tKey down',
    'H3-0001\t2019-03-09\t4,8\t-51\t812 mA',
    'H3-0002\t3/9/2019\t5.0\t-50\t800 mA',
    '=cmd|calc\t2019-03-10\t5.0\t-50\t800 mA',
    'H3-0003\t\t=1+1\t52\tn/a',
    'H3-0004\t2019-03-11\t\t\t',
  ].join('\n'),
);

describe('a table of old sheets', () => {
  const read = readHistory(pasted, null, book);
  if (!read.ok) throw new Error(read.reason);

  it('is read in the units of its headings and cells', () => {
    expect(read.sheets[0]).toEqual({
      ...{ row: 1, serial: 'H3-0001', testedOn: '2019-03-09' },
      readings: [
        { quantityKey: 'rf_power', band: '40m', enteredText: '4,8', enteredUnit: 'W', value: 4.8 },
        { quantityKey: 'harmonic_2', band: '40m', enteredText: '-51', enteredUnit: 'dBc', value: -51 },
        {
          quantityKey: 'current_key_down',
          band: null,
          enteredText: '812 mA',
          enteredUnit: 'mA',
          value: 0.812,
        },
      ],
    });
  });

  it('leaves out and names what cannot be read, formulas of a spreadsheet too', () => {
    expect(read.sheets.map(({ serial }) => serial)).toEqual(['H3-0001', 'H3-0003']);
    expect(read.refused.map(({ row, column, text }) => [row, column, text])).toEqual([
      [2, 'Date', '3/9/2019'],
      [3, 'Serial', '=cmd|calc'],
      [4, '40 m power [W]', '=1+1'],
      [5, 'Serial', 'H3-0004'],
    ]);
    expect(read.sheets[1]?.readings.map(({ value }) => value)).toEqual([-52]);
  });

  it('follows what somebody corrected', () => {
    const columns = read.columns.map((column, index) => (index === 2 ? { ...column, unit: 'dBm' } : column));
    const again = readHistory(pasted, columns, book);
    expect(again.ok ? again.sheets[0]?.readings[0]?.value : null).toBeCloseTo(0.00302, 5);
  });

  it('needs a column of serial numbers', () => {
    const without = readHistory(pasted, [{ meaning: '', band: '', unit: '' }], book);
    expect(without.ok ? without.refused[0]?.reason : '').toBe('No column holds the serial number.');
  });

  it.each([
    [[[]], /Nothing was pasted/],
    [[['Serial']], /Only a row of headings/],
    [Array.from({ length: mostHistoryRows + 2 }, () => ['H3-1']), /5001 rows; paste at most 5000/],
    [[Array.from({ length: 61 }, () => 'x'), ['1']], /at most 60 columns/],
  ])('is refused whole where it is none', (rows, sentence) => {
    const refused = readHistory(rows, null, book);
    expect(refused.ok ? '' : refused.reason).toMatch(sentence);
  });
});
