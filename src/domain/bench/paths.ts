import { formatFrequency, formatPower } from './format';
import type { PathPart, PathSpec } from './types';

type LossResult = { ok: true; lossDb: number } | { ok: false; reason: string };

/**
 * Loss of one part at a frequency: linear in dB over log frequency between the rows of its table. Refuses
 * outside the table's span.
 * @param freqHz Hz, above 0
 */
export function partLoss(part: PathPart, freqHz: number): LossResult {
  const rows = part.loss;
  const first = rows[0];
  const last = rows[rows.length - 1];
  if (first === undefined || last === undefined) {
    return { ok: false, reason: `${part.name} has no loss table.` };
  }
  if (!(freqHz >= first[0] && freqHz <= last[0])) {
    return {
      ok: false,
      reason:
        `${part.name} has losses from ${formatFrequency(first[0])} to ${formatFrequency(last[0])} only, ` +
        `not at ${formatFrequency(freqHz)}. Measure it there or use another part.`,
    };
  }
  for (let index = 0; index < rows.length; index += 1) {
    const high = rows[index];
    if (high === undefined || freqHz > high[0]) continue;
    const low = rows[index - 1];
    if (low === undefined || freqHz === high[0]) return { ok: true, lossDb: high[1] };
    const share = Math.log(freqHz / low[0]) / Math.log(high[0] / low[0]);
    return { ok: true, lossDb: low[1] + share * (high[1] - low[1]) };
  }
  return { ok: true, lossDb: last[1] };
}

/** Loss of a whole path at a frequency, dB: the sum over its parts. An absent path loses nothing. */
export function pathLoss(path: PathSpec | null, freqHz: number): LossResult {
  let lossDb = 0;
  for (const part of path?.parts ?? []) {
    const loss = partLoss(part, freqHz);
    if (!loss.ok) return loss;
    lossDb += loss.lossDb;
  }
  return { ok: true, lossDb };
}

/**
 * Whether every part stands the power that reaches it. Where a table does not cover the frequency the
 * smallest loss of the part is taken, so that the parts behind it are not thought safer than they are.
 */
export function checkPathPower(
  path: PathSpec,
  powerW: number,
  freqHz: number,
): { ok: true } | { ok: false; reason: string } {
  let arrivingW = powerW;
  for (const part of path.parts) {
    if (part.ratingW !== null && arrivingW > part.ratingW) {
      return {
        ok: false,
        reason:
          `${part.name} is rated for ${formatPower(part.ratingW)} and would get ${formatPower(arrivingW)}. ` +
          'Do not key; put a part rated for the power first.',
      };
    }
    const loss = partLoss(part, freqHz);
    const lossDb = loss.ok ? loss.lossDb : Math.min(...part.loss.map(([, rowDb]) => rowDb));
    arrivingW *= 10 ** (-lossDb / 10);
  }
  return { ok: true };
}
