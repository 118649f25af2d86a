import { planForBand } from '~/domain/bench/frequency-plan';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { productNamer } from '~/domain/bench/name-products';
import { analyseSweep, lineSpacing } from '~/domain/bench/sweep/analyse-sweep';
import { readSweep } from '~/domain/bench/sweep/read-sweep';
import { byTurns, figure } from '../setup/figures';

const points = 100_000;
const stepHz = 800;

const fixed = (symbol: string, name: string, freqHz: number) => ({
  ...{ symbol, name },
  ranges: [{ band: null, lowHz: freqHz, highHz: freqHz }],
});

/** A premixed local oscillator less an intermediate frequency, as the lines of the spectrum below have it. */
const plan: FrequencyPlan = {
  oscillators: [
    { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 3.0e6, highHz: 3.1e6 }] },
    fixed('XO', 'Crystal oscillator', 8.93e6),
    fixed('BFO', 'BFO', 4.915e6),
  ],
  stages: [{ symbol: 'LO', name: 'Local oscillator', band: null, expression: 'XO + VFO' }],
  carriers: [{ band: null, expression: 'LO − BFO' }],
  spacings: [],
};
const names = ['BFO leak', 'local oscillator leak', 'image', 'unexplained'];

/** A spectrum as an analyser writes it: a 7.03 MHz carrier, its harmonics, some other lines, and noise. */
function writeSweep(): string {
  const lines = new Map<number, number>();
  const put = (freqHz: number, levelDbm: number) => lines.set(Math.round(freqHz / stepHz), levelDbm);
  put(0, -12);
  for (let order = 1; order <= 10; order += 1) put(order * 7.03e6, order === 1 ? -5.3 : -46 - 4 * order);
  for (const [freqHz, levelDbm] of [
    [4.915e6, -58.2],
    [11.945e6, -61.4],
    [16.86e6, -66.3],
    [34.567e6, -69.8],
  ] as const) {
    put(freqHz, levelDbm);
  }
  let seed = 7;
  const rows = Array.from({ length: points }, (_, index) => {
    seed = (seed * 1_103_515_245 + 12_345) % 2_147_483_648;
    const noise = -92 + (3 * seed) / 2_147_483_648;
    return `${index * stepHz},${(lines.get(index) ?? noise).toFixed(2)}`;
  });
  return `Resolution bandwidth,3,kHz\nDetector,Positive peak\nFrequency (Hz),Level (dBm)\n${rows.join('\n')}\n`;
}

figure({
  name: 'sweep',
  goal: 3,
  run: () => {
    const text = writeSweep();
    const bytes = new TextEncoder().encode(text);
    return byTurns(
      () => {
        const sweep = readSweep(bytes);
        if (!sweep.ok) throw new Error(sweep.reason);
        const found = analyseSweep(sweep, { testFreqHz: 7.03e6, path: null });
        if (!found.ok) throw new Error(found.reason);
        const planned = planForBand(plan, '40m');
        if (!planned.ok) throw new Error(planned.reason);
        const toleranceHz = lineSpacing(sweep.understood);
        const name = productNamer({ plan: planned.plan, carrierHz: found.fundamental.freqHz, toleranceHz });
        const named = found.others.map(({ freqHz }) => name(freqHz).name);
        if (sweep.points.freqHz.length !== points || named.join() !== names.join()) {
          throw new Error(`Misread: ${named.join()}`);
        }
      },
      () => {
        const freqHz = new Float64Array(points);
        const level = new Float64Array(points);
        let at = 0;
        for (const line of text.split('\n')) {
          const [first = '', second = ''] = line.split(',');
          freqHz[at] = Number(first);
          level[at] = Number(second);
          at += 1;
        }
        return level;
      },
    );
  },
});
