import { formatDbm, formatNumber, formatPower } from './format';
import { limitDbc, ruleByKey } from './limit-rules';
import type { LimitRule } from './limit-rules';
import { readFrequency, readLimit } from './plan-lines';
import { shippedQuantity } from './quantities';
import { dbmToW } from './units';

/** What is asked of the rules, as it was typed. */
interface Question {
  power: string | undefined;
  tx: string | undefined;
  product: string | undefined;
}

export interface LimitAnswer {
  key: string;
  title: string;
  /** `−43.0 dBc`; null where the rule says nothing. */
  limit: string | null;
  /** `−6.01 dBm, 251 µW`. */
  level: string;
  text: string;
}

export type LimitAnswers =
  | { kind: 'not_asked' }
  | { kind: 'not_read'; faults: { power?: string; tx?: string; product?: string } }
  | { kind: 'answered'; answers: LimitAnswer[] };

/** What every rule asks of a product, for a power, a transmit frequency and, where it is known, the product's own. */
export function answerLimits(rules: readonly LimitRule[], { power, tx, product }: Question): LimitAnswers {
  if (power === undefined || tx === undefined) return { kind: 'not_asked' };
  const quantity = shippedQuantity('rf_power');
  if (quantity === undefined) throw new Error('The power ships.');
  const powerW = readLimit(power, { ...quantity, defaultUnit: 'W' });
  const txFreq = readFrequency(tx);
  const own = product === undefined || product.trim() === '' ? null : readFrequency(product);
  if (!powerW.ok || !txFreq.ok || own?.ok === false) {
    return {
      kind: 'not_read',
      faults: {
        ...(powerW.ok ? {} : { power: powerW.reason }),
        ...(txFreq.ok ? {} : { tx: txFreq.reason }),
        ...(own?.ok === false ? { product: own.reason } : {}),
      },
    };
  }
  const args = {
    powerW: powerW.value,
    txFreqHz: txFreq.freqHz,
    productFreqHz: own?.ok === true ? own.freqHz : null,
  };
  return {
    kind: 'answered',
    answers: rules.map(({ key, title }): LimitAnswer => {
      const chosen = ruleByKey(key, rules);
      const limit = chosen === null ? null : limitDbc(chosen, args);
      if (limit?.ok !== true) {
        return { key, title, limit: null, level: '', text: limit?.reason ?? '' };
      }
      return {
        ...{ key, title, text: limit.ruleText },
        limit: `${formatNumber(limit.limitDbc, 1)} dBc`,
        level: `${formatDbm(limit.limitDbm)}, ${formatPower(dbmToW(limit.limitDbm))}`,
      };
    }),
  };
}
