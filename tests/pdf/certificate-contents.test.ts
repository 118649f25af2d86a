import { describe, expect, it, vi } from 'vitest';
import type { CertificateStatement } from '~/domain/certificates/statement';
import { buildBandPoints, buildPoint, buildStatement } from './build-statement';
import { renderStatement } from './render-statement';
import { drawnTextOf, textOf } from './tools';

vi.setConfig({ testTimeout: 60_000 });

const squeezed = (text: string) => text.replace(/\s+/gu, ' ');
const drawn = async (over: Partial<CertificateStatement> = {}) =>
  squeezed(drawnTextOf(await renderStatement(over)));

// ISO/IEC 17025:2017, 7.8.2.1, as far as it applies to a works that tests what it builds: it receives nothing (h), samples
// nothing (k) and has nothing done outside (p).
describe('7.8.2.1: what a report has', () => {
  it.each([
    ['a: a title', 'Final test certificate'],
    ['b: the name and address of who tested', 'Thistledown Radio Works 4 Ropewalk Yard, Selwick'],
    ['c: where it was tested', 'By Ines Aldous, at the works'],
    ['d: a unique number on every page, and its end', 'TC-2027-00412. The results'],
    ['d: its end', 'page 1 of 1'],
    ['e: for whom', 'Built for Q0ABC order 1093'],
    ['f: the method', 'Test plan H3 rev C'],
    ['g: what was tested, so that it cannot be mistaken', 'H3-0147 Holm 3 · 40 / 30 / 20 m · narrow filter'],
    ['i: when it was tested', 'Tested 9 March 2027, 15:10 UTC'],
    ['j: when it was issued', 'Issued 9 March 2027 by Ines Aldous'],
    ['l: that it is of this unit alone', 'The results relate only to the unit tested.'],
    ['m: the results with their units', '3.12 W'],
    ['n: deviations', 'Departures. Keyed by hand, not by the keyer.'],
    ['o: who authorised it', 'Issued by Ines Aldous, 9 March 2027'],
    ['NOTE: that it is copied as a whole', 'Not to be reproduced except in full.'],
  ])('%s', async (_, words) => {
    expect(
      await drawn({ place: 'at the works', deviations: ['Keyed by hand, not by the keyer.'] }),
    ).toContain(words);
  });

  it('m: has a unit beside each result or over its column, and nowhere a bare number', async () => {
    const text = textOf(await renderStatement());
    for (const words of [
      'Carrier, MHz',
      '2nd harmonic,',
      '3rd harmonic,',
      'dBc',
      '3.12 W',
      '612 mA',
      '+40 Hz',
    ]) {
      expect(text).toContain(words);
    }
  });
});

// ISO/IEC 17025:2017, 7.8.3.1 and 7.8.6.
describe('7.8.6: the statement of conformity', () => {
  it('says which rule decided', async () => {
    expect(await drawn()).toContain('Decided by: Guard band w = U for the limit on emissions');
  });

  it('says which results, and which specification is met', async () => {
    const text = await drawn();
    expect(text).toContain(
      'Every harmonic up to the 10th and every other product from 1 to 150 MHz is inside',
    );
    expect(text).toContain('2nd harmonic; 3rd harmonic: ITU-R SM.329 category A, guarded (w = U).');
  });

  it('gives the uncertainty of each result with its k', async () => {
    expect(await drawn()).toContain('±, k = 2 10 Hz 5 % 0.9 dB 0.9 dB 1 %');
  });

  it('prints the conditions that influence the results', async () => {
    expect(await drawn()).toMatch(/Supply 13\.80 V .*Load, ambient 50 Ω, 21 °C/u);
  });
});

describe('what has to be said where it is so', () => {
  const instrument = { name: 'analyser SA-1', grade: 'accredited' as const, gradeNote: '' };

  it('a calibration that was overdue on the day of the test', async () => {
    const text = (calibrationDueOn: string) => drawn({ instruments: [{ ...instrument, calibrationDueOn }] });
    expect(await text('2027-03-08')).toContain('calibration OVERDUE since 8 March 2027');
    expect(await text('2027-03-09')).toContain('calibration due 9 March 2027');
  });

  it.each([
    ['accredited', '', 'accredited calibration'],
    ['checked', 'against PM-2 on 1 March 2027', 'checked against PM-2 on 1 March 2027'],
    ['unchecked', '', 'unchecked: its published specification alone'],
  ] as const)('the grade of an instrument: %s', async (grade, gradeNote, words) => {
    const instruments = [{ name: 'SA-1', grade, gradeNote, calibrationDueOn: null }];
    expect(await drawn({ instruments })).toContain(`SA-1 (${words}, no calibration due date)`);
  });

  it('how many readings a mean is of, and a value that is hidden in the noise', async () => {
    const points = [
      buildPoint({ n: 3 }),
      buildPoint({ band: '30 m', freqHz: 10_116_000, text: '≤ −71.0 dBc' }),
    ];
    const text = await drawn({ points });
    expect(text).toContain('mean of 3');
    expect(text).toContain('≤ −71.0 dBc');
  });

  it('what was computed, and what was taken over from an old sheet', async () => {
    const points = [
      ...buildBandPoints(),
      buildPoint({ label: 'Efficiency', quantityKey: 'efficiency', text: '37 %', origin: 'computed' }),
      buildPoint({ label: 'Sensitivity', quantityKey: 'mds', text: '−128 dBm', origin: 'history' }),
    ];
    const text = await drawn({ points });
    expect(text).toContain('Computed from other readings of this run: Efficiency, 40 m.');
    expect(text).toContain('Taken over from an earlier test sheet, not read in this run: Sensitivity, 40 m.');
  });

  it('how a sensitivity was judged, and a supply that is not the run’s', async () => {
    const points = [
      ...buildBandPoints(),
      buildPoint({ label: 'Sensitivity', quantityKey: 'sensitivity', condition: '10 dB (S+N)/N in 500 Hz' }),
      buildPoint({ quantityKey: 'low', label: 'Power, flat cells', condition: 'supply 11.00 V' }),
    ];
    const text = await drawn({ points });
    expect(text).toContain('Sensitivity, 40 m: 10 dB (S+N)/N in 500 Hz.');
    expect(text).toContain('Power, flat cells, 40 m: supply 11.00 V.');
  });

  it('what was not assessed', async () => {
    expect(await drawn()).toContain('Not assessed to EN 301 783.');
    expect(await drawn({ notAssessed: ['Harmonics above the 5th were not assessed.'] })).not.toContain(
      'EN 301',
    );
  });

  it('what the amendment of an amendment changed', async () => {
    const replaces = {
      ...{ number: 'TC-2027-00412A', reason: 'The firmware was misread.' },
      changes: ['Firmware: “1.3” before, now “1.4”.'],
    };
    expect(await drawn({ letter: 'B', replaces })).toContain(
      'Amendment to report, serial number TC-2027-00412A. It replaces certificate TC-2027-00412A. ' +
        'Why: The firmware was misread. What differs: Firmware: “1.3” before, now “1.4”.',
    );
  });

  it('no mark or claim of an accreditation of its own', async () => {
    const text = await drawn({ instruments: [] });
    expect(text).not.toMatch(/accredit|ISO\/IEC 17025|EN 10204/iu);
  });
});

describe('a statement of the first form', () => {
  it('is printed as it is, with nothing put in', async () => {
    const first = buildStatement();
    expect(first).not.toHaveProperty('place');
    expect(await drawn()).toContain('By Ines Aldous Load, ambient');
  });
});
