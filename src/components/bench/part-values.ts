import { lossTableText } from '~/domain/bench/loss-table';
import type { PathPart } from '~/domain/bench/types';

const shown = (value: number | null) => (value === null ? '' : String(value));

/** A path part as the fields of its form hold it. */
export function partValues(part: PathPart): Record<string, string> {
  return {
    name: part.name,
    lossTable: lossTableText(part.loss),
    uncertaintyDb: String(part.uncertaintyDb),
    k: String(part.k),
    flatnessDb: shown(part.flatnessDb),
    ratingW: shown(part.ratingW),
    vswr: shown(part.vswr),
  };
}
