import type { FrequencyPlan, Oscillator, OscillatorRange } from '~/domain/bench/frequency-plan';
import type { BandKey } from '~/domain/bench/types';

const fixed = (symbol: string, name: string, freqHz: number): Oscillator => ({
  ...{ symbol, name },
  ranges: [{ band: null, lowHz: freqHz, highHz: freqHz }],
});

/** Where a local oscillator runs that lies above the band by an intermediate frequency. */
function above(band: BandKey, lowHz: number, highHz: number, ifHz: number): OscillatorRange {
  return { band, lowHz: lowHz + ifHz, highHz: highHz + ifHz };
}

const holmIfHz = 4_915_200;

/** What oscillates in the rigs of the demo works. */
export const demoFrequencyPlans: Readonly<Record<string, FrequencyPlan>> = {
  'voe-40': {
    oscillators: [
      { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 4.996e6, highHz: 5.096e6 }] },
      fixed('XO', 'Crystal oscillator', 12.096e6),
    ],
    stages: [],
    carriers: [{ band: '40m', expression: 'XO − VFO' }],
    spacings: [{ kind: 'clock', name: 'Display clock', spacingHz: 1e6 }],
  },
  'holm-3': {
    oscillators: [
      {
        ...{ symbol: 'LO', name: 'Local oscillator' },
        ranges: [
          above('40m', 7.0e6, 7.2e6, holmIfHz),
          above('30m', 10.1e6, 10.15e6, holmIfHz),
          above('20m', 14.0e6, 14.35e6, holmIfHz),
          above('15m', 21.0e6, 21.45e6, holmIfHz),
        ],
      },
      fixed('BFO', 'BFO', holmIfHz),
    ],
    stages: [],
    carriers: (['40m', '30m', '20m', '15m'] as const).map((band) => ({ band, expression: 'LO − BFO' })),
    spacings: [{ kind: 'supply', name: 'Display converter', spacingHz: 150e3 }],
  },
  'skerry-5': {
    oscillators: [
      {
        ...{ symbol: 'SYN', name: 'Synthesizer' },
        ranges: [
          { band: '40m', lowHz: 7.0e6, highHz: 7.2e6 },
          { band: '30m', lowHz: 10.1e6, highHz: 10.15e6 },
          { band: '20m', lowHz: 14.0e6, highHz: 14.35e6 },
          { band: '17m', lowHz: 18.068e6, highHz: 18.168e6 },
          { band: '15m', lowHz: 21.0e6, highHz: 21.45e6 },
        ],
      },
      fixed('REF', 'Reference', 25e6),
    ],
    stages: [],
    carriers: (['40m', '30m', '20m', '17m', '15m'] as const).map((band) => ({ band, expression: 'SYN' })),
    spacings: [{ kind: 'clock', name: 'Processor clock', spacingHz: 16e6 }],
  },
};
