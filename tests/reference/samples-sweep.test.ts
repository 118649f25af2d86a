import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { analyseSweep } from '~/domain/bench/sweep/analyse-sweep';
import { readSweep } from '~/domain/bench/sweep/read-sweep';

const repository = fileURLToPath(new URL('../..', import.meta.url));
const samples = process.env.RIGWRIGHT_SAMPLES ?? path.resolve(repository, '../shared/samples');
const folder = path.join(samples, 'sweep');
const present = existsSync(folder);
const reason = present ? '' : ` (skipped: no sample files; set RIGWRIGHT_SAMPLES to their folder)`;

const bytesOf = (name: string): Uint8Array => readFileSync(path.join(folder, name));
const textOf = (name: string): string => readFileSync(path.join(folder, name), 'utf8');

function read(bytes: Uint8Array, hints = {}) {
  const result = readSweep(bytes, hints);
  if (!result.ok) throw new Error(result.reason);
  return result;
}

/** What is asked about a sweep, in one text. */
const asked = ({ questions }: ReturnType<typeof read>): string => questions.map(({ text }) => text).join(' ');

/** The sentence of a refusal; empty where it is none. */
const reasonOf = (result: { ok: true } | { ok: false; reason: string }): string =>
  result.ok ? '' : result.reason;

function expectTrace001(bytes: Uint8Array): void {
  const sweep = read(bytes);
  expect(sweep.understood).toMatchObject({
    points: 461,
    spanHz: [0, 50e6],
    rbwHz: 300,
    units: { freq: 'Hz', level: 'dBm' },
    levelCalibrated: true,
  });
  expect(asked(sweep)).toMatch(/108\.696 kHz apart, wider than .* 300 Hz.*peak detector/);
  // The 0 Hz feed-through at −5.40 dBm is the highest point of the file.
  expect(Math.max(...sweep.points.level)).toBeCloseTo(-5.4, 2);
  const found = analyseSweep(sweep, { testFreqHz: 0.98e6, path: null });
  if (!found.ok) throw new Error(found.reason);
  expect(found.fundamental.freqHz).toBeCloseTo(978_260.87, 1);
  expect(Math.abs(found.fundamental.levelDbm - -12.867)).toBeLessThanOrEqual(0.01);
  const expected = new Map([
    [2, -26.29],
    [3, -9.78],
    [4, -26.42],
    [5, -14.55],
    [7, -17.93],
    [9, -20.77],
  ]);
  for (const [order, dbc] of expected) {
    const harmonic = found.harmonics.find((each) => each.order === order);
    expect(Math.abs((harmonic?.meterDbc ?? 0) - dbc)).toBeLessThanOrEqual(0.01);
  }
}

describe.skipIf(!present)(`sweep files of other tools${reason}`, () => {
  it('n9320b_TRACE001.csv: units glued to the numbers, harmonics within 0.01 dB, spike at 0 Hz ignored', () => {
    expectTrace001(bytesOf('n9320b_TRACE001.csv'));
  });

  it('n9320b_TRACE001.csv with decimal commas and semicolons', () => {
    const text = textOf('n9320b_TRACE001.csv').replaceAll(',', ';').replaceAll('.', ',');
    const bytes = new TextEncoder().encode(text);
    expect(read(bytes).understood).toMatchObject({ separator: ';', decimal: ',' });
    expectTrace001(bytes);
  });

  it('n9320b_TRACE001.csv in UTF-16 with a byte-order mark, either way round', () => {
    const little = Buffer.from(`\ufeff${textOf('n9320b_TRACE001.csv')}`, 'utf16le');
    expect(read(little).understood.encoding).toBe('UTF-16');
    expectTrace001(little);
    expectTrace001(Buffer.from(little).swap16());
  });

  it('n9320b_TRACE001.csv separated by tabs', () => {
    const bytes = new TextEncoder().encode(textOf('n9320b_TRACE001.csv').replaceAll(',', '\t'));
    expect(read(bytes).understood.separator).toBe('tab');
    expectTrace001(bytes);
  });

  it('rtl_power_small.csv: row blocks, put in order, uncalibrated, so that no verdict can rest on it', () => {
    const sweep = read(bytesOf('rtl_power_small.csv'));
    expect(sweep.understood).toMatchObject({ form: 'row blocks', points: 128, levelCalibrated: false });
    expect(sweep.points.freqHz[0]).toBe(890e6);
    expect(sweep.points.level[0]).toBe(-25.98);
    expect(sweep.notes.join(' ')).toMatch(/not calibrated: no verdict/);
    const dbm = read(bytesOf('rtl_power_small.csv'), { levelUnit: 'dBm' });
    expect(dbm.understood.levelCalibrated).toBe(false);
    expect(reasonOf(analyseSweep(dbm, { testFreqHz: 895e6, path: null }))).toMatch(/not calibrated/);
  });

  it('rtl_power_small.csv comes out the same whatever the order of its blocks', () => {
    const lines = textOf('rtl_power_small.csv').trimEnd().split('\n').reverse();
    const turned = read(new TextEncoder().encode(lines.join('\n')));
    expect(turned.points).toEqual(read(bytesOf('rtl_power_small.csv')).points);
  });

  it('gocat_matrix_mhz_header.csv: frequencies in the heading; asks for MHz and for the unit of the level', () => {
    const sweep = read(bytesOf('gocat_matrix_mhz_header.csv'));
    expect(sweep.understood).toMatchObject({ form: 'matrix', points: 50, spanHz: [433.42e6, 434.4e6] });
    expect(sweep.understood.levelCalibrated).toBe(false);
    expect(asked(sweep)).toMatch(/MHz.*unit of the level/);
    const columns = textOf('gocat_matrix_mhz_header.csv').trimEnd().split('\n').slice(1);
    const highest = Math.max(...columns.map((line) => Number(line.split(',')[1])));
    expect(sweep.points.level[0]).toBe(highest);
  });

  it('digilent_waveforms_spectrum.csv: frequencies rebuilt from start, stop and bins; asks which trace and unit', () => {
    const sweep = read(bytesOf('digilent_waveforms_spectrum.csv'));
    expect(sweep.understood).toMatchObject({ form: 'start and stop', points: 4097, spanHz: [0, 5000] });
    expect(sweep.points.freqHz[1]).toBeCloseTo(5000 / 4096, 9);
    expect(sweep.points.level[0]).toBe(-54.71917787790511);
    expect(asked(sweep)).toMatch(/2 traces.*unit of the level/);
    const second = read(bytesOf('digilent_waveforms_spectrum.csv'), { levelColumn: 2 });
    expect(second.points.level[0]).toBe(-49.21571994425221);
  });

  it('vna_trace01_quoted_preamble.csv: read as numbers, asks for the unit, and nothing can rest on it', () => {
    const sweep = read(bytesOf('vna_trace01_quoted_preamble.csv'));
    expect(sweep.understood).toMatchObject({
      points: 1601,
      spanHz: [1e6, 100e6],
      units: { level: null },
      levelCalibrated: false,
    });
    expect(asked(sweep)).toMatch(/network analyser/);
    expect(sweep.notes.join(' ')).toMatch(/More than one column is called “Formatted Data”/);
    expect(reasonOf(analyseSweep(sweep, { testFreqHz: 7e6, path: null }))).toMatch(
      /unit of the level is not known/,
    );
  });
});
