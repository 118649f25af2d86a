import type { CertificateStatement, StatedPoint } from '~/domain/certificates/statement';
import { digestBuyer } from '~/server/keys/ed25519';

const BANDS = [
  {
    band: '40 m',
    freqHz: 7_030_040,
    powerW: 3.12,
    second: -54.7,
    third: -61.0,
    allowed: -47.9,
    currentA: 0.612,
  },
  {
    band: '30 m',
    freqHz: 10_116_040,
    powerW: 2.94,
    second: -49.2,
    third: -58.8,
    allowed: -47.7,
    currentA: 0.598,
  },
  {
    band: '20 m',
    freqHz: 14_060_030,
    powerW: 2.61,
    second: -51.1,
    third: -61.6,
    allowed: -47.2,
    currentA: 0.59,
  },
];

/** One point; what is not given is a plain passed reading of the 40 m band. */
export function buildPoint(over: Partial<StatedPoint> = {}): StatedPoint {
  return {
    label: 'Power',
    quantityKey: 'rf_power',
    band: '40 m',
    freqHz: 7_030_040,
    value: 3.12,
    unit: 'W',
    text: '3.12 W',
    atMeterText: '−5.06 dBm',
    uncertainty: { value: 0.21, unit: 'dB', k: 2, low: 2.97, high: 3.28, text: '5 %' },
    n: 1,
    lower: 2.4,
    upper: 3.6,
    limitText: '2.4 to 3.6 W',
    ruleText: 'works’ own',
    decision: 'simple',
    verdict: 'pass',
    concession: null,
    ...over,
  };
}

/** The points of some bands: carrier, power, two harmonics, current. */
export function buildBandPoints(bands = BANDS): StatedPoint[] {
  return bands.flatMap(({ band, freqHz, powerW, second, third, allowed, currentA }) => {
    const at = { band, freqHz };
    const ratio = (label: string, quantityKey: string, value: number, n: number) =>
      buildPoint({
        ...at,
        label,
        quantityKey,
        value,
        unit: 'dBc',
        text: `−${Math.abs(value).toFixed(1)} dBc`,
        atMeterText: `−${Math.abs(value).toFixed(1)} dBc`,
        uncertainty: { value: 0.9, unit: 'dB', k: 2, low: value - 0.9, high: value + 0.9, text: '0.9 dB' },
        n,
        lower: null,
        upper: allowed,
        limitText: `≤ −${Math.abs(allowed).toFixed(1)} dBc`,
        ruleText: 'ITU-R SM.329 category A',
        decision: 'guarded',
      });
    return [
      buildPoint({
        ...at,
        label: 'Frequency error',
        quantityKey: 'frequency_error',
        value: 40,
        unit: 'Hz',
        text: '+40 Hz',
        atMeterText: `${(freqHz / 1e6).toFixed(5)} MHz`,
        uncertainty: { value: 10, unit: 'Hz', k: 2, low: 30, high: 50, text: '10 Hz' },
        lower: -100,
        upper: 100,
        limitText: '±100 Hz',
      }),
      buildPoint({ ...at, value: powerW, text: `${powerW.toFixed(2)} W` }),
      ratio('2nd harmonic', 'harmonic_2', second, band === '30 m' ? 3 : 1),
      ratio('3rd harmonic', 'harmonic_3', third, 1),
      buildPoint({
        ...at,
        label: 'Current, key down',
        quantityKey: 'current_key_down',
        value: currentA,
        unit: 'A',
        text: `${(currentA * 1000).toFixed(0)} mA`,
        atMeterText: `${(currentA * 1000).toFixed(0)} mA`,
        uncertainty: {
          value: currentA * 0.01,
          unit: 'A',
          k: 2,
          low: currentA * 0.99,
          high: currentA * 1.01,
          text: '1 %',
        },
        lower: null,
        upper: 0.7,
        limitText: '≤ 700 mA',
      }),
    ];
  });
}

/** A whole statement of an invented unit, the one that the look is drawn for. */
export function buildStatement(over: Partial<CertificateStatement> = {}): CertificateStatement {
  const buyer = { callSign: 'Q0ABC', orderNumber: '1093', salt: '00112233445566778899aabbccddeeff' };
  return {
    format: 'certificate-statement/1',
    works: {
      name: 'Thistledown Radio Works',
      addressLines: ['4 Ropewalk Yard', 'Selwick', 'Northshire NS4 1QA'],
    },
    number: 'TC-2027-00412',
    letter: '',
    replaces: null,
    unit: {
      serial: 'H3-0147',
      model: 'Holm 3',
      options: '40 / 30 / 20 m · narrow filter',
      bomRevision: 'D',
      firmware: '1.4',
      alignment: [],
    },
    batchNumber: '12',
    buyer,
    buyerDigest: digestBuyer(buyer),
    run: { number: 2, note: 'run 1 stopped, reworked' },
    testedAt: '2027-03-09T15:10:00.000Z',
    issuedOn: '2027-03-09',
    testedBy: 'Ines Aldous',
    issuedBy: 'Ines Aldous',
    conditions: { supply: '13.80 V', load: '50 Ω', ambient: '21 °C' },
    testPlan: { name: 'H3', revision: 'C' },
    result: 'passed',
    points: buildBandPoints(),
    instruments: [
      { name: 'power meter PM-2', grade: 'accredited', gradeNote: '', calibrationDueOn: '2027-11-14' },
      { name: 'analyser SA-1', grade: 'checked', gradeNote: 'against PM-2', calibrationDueOn: '2027-08-02' },
    ],
    path: '40 dB tap T-1',
    decisionRule:
      'Guard band w = U for the limit on emissions, as in ILAC-G8:09/2019; the works’ own limits as read.',
    conformity: [
      'Every harmonic up to the 10th and every other product from 1 to 150 MHz is inside ITU-R SM.329 category A at the measured power by more than its expanded uncertainty.',
      'Power, current and carrier are inside the works’ own limits.',
    ],
    notAssessed: ['Not assessed to EN 301 783.'],
    deviations: [],
    cautions: [
      'The figures hold for this unit as tested.',
      'This is not a type approval: using a transmitter needs the licence your own administration asks for.',
    ],
    code: '7F3K92QDHM0V',
    checkUrl: 'https://works.example/c/7F3K92QDHM0V',
    computationVersion: '1',
    ...over,
  };
}
