import type { PointJudgement } from '~/domain/bench/judge-point';
import { limitDbc } from '~/domain/bench/limit-rules';
import type { Station } from '~/schemas/bench-station';

/** The limit of products over frequency; null where the rule says none. */
export type LimitAt = (productFreqHz: number) => number | null;

/** Limits on a band by its measured power, or by the rated one while that is not known. */
export function limitsOn(
  band: string | null,
  { sheet, unit }: Station,
  judgements: ReadonlyMap<number, PointJudgement>,
): LimitAt {
  const power = sheet.points.find((point) => point.band === band && point.quantity.key === 'rf_power');
  const powerW = (power === undefined ? null : judgements.get(power.id)?.value) ?? unit.ratedPowerW;
  const txFreqHz =
    power?.freqHz ?? sheet.points.find((point) => point.band === band && point.freqHz !== null)?.freqHz;
  return (productFreqHz) => {
    if (txFreqHz === null || txFreqHz === undefined) return null;
    const limit = limitDbc(sheet.rule, { powerW, txFreqHz, productFreqHz });
    return limit.ok ? limit.limitDbc : null;
  };
}
