import { analyseSweep } from '~/domain/bench/sweep/analyse-sweep';
import { readSweep } from '~/domain/bench/sweep/read-sweep';
import { byTurns, figure } from '../setup/figures';

const points = 100_000;
const stepHz = 800;

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
    [33.21e6, -69.8],
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
        if (sweep.points.freqHz.length !== points || found.others.length !== 4) throw new Error('misread');
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
