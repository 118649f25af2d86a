import { evaluateFormula, parseFormula } from '~/domain/formula/formula';
import type { Formula } from '~/domain/formula/formula';
import { formatNumber } from './format';
import { SHIPPED_RULES } from './shipped-rules';
import { dbmToW, wToDbm } from './units';

/** How sure we are of a rule's text; `entered` is by a works that names itself as the source. */
export type TextCertainty = 'read' | 'read in quotation' | 'from memory' | 'entered';

/** One row of a rule: where it applies, and how far below the fundamental a product has to be there. */
export interface LimitClause {
  name: string;
  certainty: TextCertainty;
  /** Which frequency decides whether the row applies. */
  by: 'transmit' | 'product';
  /** Inclusive, Hz; null is open. */
  fromHz: number | null;
  /** Exclusive, Hz; null is open. */
  toHz: number | null;
  /** True where `toHz` itself still belongs to the row. */
  toInclusive?: boolean | undefined;
  /** Exclusive, W: the row is for less mean power only. */
  underW?: number | null | undefined;
  /** Attenuation asked for, dB: a formula of `P` (mean power, W), `ftx` and `fp` (Hz), see {@link LIMIT_NAMES}. */
  requiredDb: string;
}

/** An emission rule as data; `clauses` are tried in order and the first that covers the frequencies applies. */
export interface LimitRule {
  key: string;
  title: string;
  source: string;
  edition: string;
  /** ISO days between which the rule is in force; null is open. */
  validFrom: string | null;
  validTo: string | null;
  certainty: TextCertainty;
  /** What a reader must know about the text or its use. */
  note: string;
  /** ISO 3166-1 alpha-2 codes of where it applies. */
  destinations: readonly string[];
  /** Applies wherever no other rule does. */
  isElsewhere: boolean;
  /** Used for units by itself; false for one that is listed for reference. */
  isAutomatic: boolean;
  clauses: readonly LimitClause[];
}

/** What a clause's formula may name. */
export const LIMIT_NAMES = ['P', 'ftx', 'fp'] as const;

/** The rule that a run is judged by: one, or the strictest of several. */
export interface ChosenRule {
  key: string;
  title: string;
  source: string;
  note: string;
  certainty: TextCertainty;
  rules: readonly LimitRule[];
}

/** Key of the choice of the strictest of all rules, for a unit without a buyer. */
export const STRICTEST = 'strictest';

/** Measured mean power of the fundamental (W), the transmit and the product's frequency (Hz). */
interface LimitArgs {
  powerW: number;
  txFreqHz: number;
  /** Null where the product's frequency is not known. */
  productFreqHz: number | null;
}

/** The limit that applies: the reading in dBc must not exceed `limitDbc`. */
type LimitResult =
  | {
      ok: true;
      limitDbc: number;
      limitDbm: number;
      /** The rule that binds. */
      ruleKey: string;
      ruleText: string;
      certainty: TextCertainty;
    }
  | { ok: false; reason: string };

function isInForce({ validFrom, validTo }: LimitRule, day: string): boolean {
  return (validFrom === null || validFrom <= day) && (validTo === null || day <= validTo);
}

const LEAST_SURE: readonly TextCertainty[] = ['from memory', 'entered', 'read in quotation', 'read'];

function asChosen(rule: LimitRule): ChosenRule {
  const { key, title, source, note, certainty } = rule;
  return { key, title, source, note, certainty, rules: [rule] };
}

function strictestOf(rules: readonly LimitRule[]): ChosenRule {
  return {
    key: STRICTEST,
    title: 'The strictest of all rules here',
    source: rules.map(({ source }) => source).join('; '),
    note: 'For a unit without a buyer. A rule that says nothing for the product is left out.',
    certainty: LEAST_SURE.find((each) => rules.some(({ certainty }) => certainty === each)) ?? 'from memory',
    rules,
  };
}

/**
 * Rule by where the unit goes: the one that names the destination, else the one for elsewhere; the strictest of
 * all where there is no destination, or where no rule is for elsewhere. A works' own comes before one that ships.
 *
 * @param countryCode ISO 3166-1 alpha-2 or null
 * @param rules those of the works, own ones first
 * @param day of the test, ISO day: a rule counts while it is in force
 */
export function ruleForDestination(
  countryCode: string | null,
  day: string,
  rules: readonly LimitRule[] = SHIPPED_RULES,
): ChosenRule {
  const usable = rules.filter((rule) => rule.isAutomatic && isInForce(rule, day));
  if (countryCode === null) return strictestOf(usable);
  const code = countryCode.toUpperCase();
  const found =
    usable.find(({ destinations }) => destinations.includes(code)) ??
    usable.find(({ isElsewhere }) => isElsewhere);
  return found === undefined ? strictestOf(usable) : asChosen(found);
}

/** The choice of one rule by itself, for its page and for checks against its source; null where there is none. */
export function ruleByKey(key: string, rules: readonly LimitRule[] = SHIPPED_RULES): ChosenRule | null {
  const rule = rules.find((each) => each.key === key);
  return rule === undefined ? null : asChosen(rule);
}

function covers(clause: LimitClause, args: LimitArgs): boolean {
  const freqHz = clause.by === 'transmit' ? args.txFreqHz : args.productFreqHz;
  if (freqHz === null || !Number.isFinite(freqHz)) return false;
  if (clause.fromHz !== null && freqHz < clause.fromHz) return false;
  if (clause.toHz !== null && (clause.toInclusive === true ? freqHz > clause.toHz : freqHz >= clause.toHz))
    return false;
  return clause.underW === undefined || clause.underW === null || args.powerW < clause.underW;
}

// A formula's text says all there is about it, so one that was read once need not be read again.
const read = new Map<string, Formula | null>();

function formulaOf(text: string): Formula | null {
  const known = read.get(text);
  if (known !== undefined) return known;
  const parsed = parseFormula(text, LIMIT_NAMES);
  const formula = parsed.ok ? parsed.formula : null;
  read.set(text, formula);
  return formula;
}

function limitOf(rule: LimitRule, args: LimitArgs): LimitResult {
  const clause = rule.clauses.find((each) => covers(each, args));
  if (clause === undefined) {
    const reason = `${rule.title} says nothing for this frequency; state the product's frequency.`;
    return { ok: false, reason };
  }
  const formula = formulaOf(clause.requiredDb);
  const requiredDb =
    formula === null
      ? NaN
      : evaluateFormula(formula, {
          P: args.powerW,
          ftx: args.txFreqHz,
          ...(args.productFreqHz === null ? {} : { fp: args.productFreqHz }),
        });
  if (!Number.isFinite(requiredDb)) {
    return { ok: false, reason: `${clause.name} gives no limit here: its formula has no value.` };
  }
  return {
    ok: true,
    limitDbc: -requiredDb,
    limitDbm: wToDbm(args.powerW) - requiredDb,
    ruleKey: rule.key,
    ruleText: `${clause.name}: at least ${formatNumber(requiredDb, 1)} dB below the fundamental`,
    certainty: clause.certainty,
  };
}

/** Limit of a spurious product under a rule. Refuses without a measured power or where the rule is silent. */
export function limitDbc(chosen: ChosenRule, args: LimitArgs): LimitResult {
  if (!(args.powerW > 0) || !Number.isFinite(args.powerW)) {
    return {
      ok: false,
      reason: 'The limit depends on the measured power of the fundamental: measure that first.',
    };
  }
  let strictest: LimitResult = { ok: false, reason: 'No rule here covers this frequency.' };
  for (const rule of chosen.rules) {
    const limit = limitOf(rule, args);
    if (chosen.rules.length === 1) return limit;
    if (limit.ok && (!strictest.ok || limit.limitDbc < strictest.limitDbc)) strictest = limit;
  }
  return strictest;
}

/**
 * How far the limit in dBc moves with the power: dB per dB, the larger of the slopes to either side. 0 for a
 * fixed attenuation, up to 1 where the limit is an absolute level.
 */
export function limitSlope(chosen: ChosenRule, args: LimitArgs): number {
  const stepDb = 0.01;
  const at = (shiftDb: number): number | null => {
    const limit = limitDbc(chosen, { ...args, powerW: dbmToW(wToDbm(args.powerW) + shiftDb) });
    return limit.ok ? limit.limitDbc : null;
  };
  const here = at(0);
  const below = at(-stepDb);
  const above = at(stepDb);
  if (here === null || below === null || above === null) return 0;
  return Math.max(Math.abs(here - below), Math.abs(above - here)) / stepDb;
}

/**
 * Reference bandwidth in which a spurious product is stated, Hz, by its frequency: 1 kHz to 150 kHz, 10 kHz to 30 MHz,
 * 100 kHz to 1 GHz, 1 MHz above (ITU Radio Regulations, Appendix 3, from memory).
 */
export function referenceBandwidthHz(productFreqHz: number): number {
  if (productFreqHz < 150e3) return 1e3;
  if (productFreqHz < 30e6) return 10e3;
  return productFreqHz < 1e9 ? 100e3 : 1e6;
}
