import { BAND_KEYS, bandLabel, commonEdges } from './bands';
import { formatNumber, formatPower } from './format';
import { checkPathPower, pathLoss } from './paths';
import type { BandKey, PathSpec } from './types';

interface BandLoss {
  band: BandKey;
  label: string;
  /** `40.12 dB`, or why there is none. */
  text: string;
  isKnown: boolean;
}

/** Middle of what is common to all Regions, Hz. */
function middleOf(band: BandKey): number {
  const { lowHz, highHz } = commonEdges(band);
  return (lowHz + highHz) / 2;
}

/** What a path loses in the middle of each band. */
export function bandLosses(path: PathSpec): BandLoss[] {
  return BAND_KEYS.map((band) => {
    const loss = pathLoss(path, middleOf(band));
    return {
      ...{ band, label: bandLabel(band), isKnown: loss.ok },
      text: loss.ok ? `${formatNumber(loss.lossDb, 2)} dB` : loss.reason,
    };
  });
}

interface ModelPower {
  name: string;
  stands: boolean;
  text: string;
}

/** Whether a path stands the rated power of each model on every band. */
export function modelPowers(
  path: PathSpec,
  models: readonly { name: string; ratedPowerW: number }[],
): ModelPower[] {
  return models.map(({ name, ratedPowerW }) => {
    const problem = BAND_KEYS.map((band) => checkPathPower(path, ratedPowerW, middleOf(band))).find(
      (check) => !check.ok,
    );
    if (problem?.ok === false) return { name, stands: false, text: problem.reason };
    const unrated = path.parts.filter(({ ratingW }) => ratingW === null).length;
    return {
      name,
      stands: true,
      text:
        unrated === path.parts.length && unrated > 0
          ? `No part states what it stands: ${formatPower(ratedPowerW)} is on you.`
          : `Stands ${formatPower(ratedPowerW)}.`,
    };
  });
}
