import { formatNumber } from './format';
import { dbmToW, wToDbm } from './units';

/** Keys of the emission rules that ship. */
export type LimitRuleKey = 'us_97_307' | 'itu_category_a' | 'at_afv_17' | 'strictest';

/** How sure we are of a rule's text. */
type TextCertainty = 'read' | 'read in quotation' | 'from memory';

/** A rule as data; `clauses` are tried in order and the first that covers the frequencies applies. */
interface LimitRule {
  key: LimitRuleKey;
  title: string;
  source: string;
  edition: string;
  certainty: TextCertainty;
  /** What a reader must know about the text or its use. */
  note: string;
  clauses: readonly Clause[];
}

interface Clause {
  name: string;
  certainty: TextCertainty;
  covers: (args: LimitArgs) => boolean;
  /** Attenuation below the fundamental that is asked for, dB. */
  requiredDb: (args: LimitArgs) => number;
}

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
      /** The rule that binds; for `strictest` one of the others. */
      ruleKey: LimitRuleKey;
      ruleText: string;
      certainty: TextCertainty;
    }
  | { ok: false; reason: string };

/** Attenuation that brings the product down to an absolute level. */
function downTo(levelDbm: number, powerW: number): number {
  return wToDbm(powerW) - levelDbm;
}

const productHz = (args: LimitArgs): number => args.productFreqHz ?? NaN;

const US: LimitRule = {
  key: 'us_97_307',
  title: '47 CFR 97.307(d), (e)',
  source: '47 CFR 97.307',
  edition: 'as amended for transmitters installed after 1 January 2003',
  certainty: 'read',
  note: 'The transmit frequency decides between (d) and (e), not that of the product. No reference bandwidth is given.',
  clauses: [
    {
      name: '47 CFR 97.307(d)',
      certainty: 'read',
      covers: ({ txFreqHz }) => txFreqHz < 30e6,
      requiredDb: () => 43,
    },
    {
      name: '47 CFR 97.307(e)',
      certainty: 'read',
      covers: ({ txFreqHz }) => txFreqHz >= 30e6 && txFreqHz <= 225e6,
      requiredDb: ({ powerW }) => {
        if (powerW > 25) return 60;
        // At most 25 µW and 40 dB down, but nothing need go below 10 µW.
        const limitW = Math.max(10e-6, Math.min(25e-6, powerW * 1e-4));
        return 10 * Math.log10(powerW / limitW);
      },
    },
  ],
};

const ITU: LimitRule = {
  key: 'itu_category_a',
  title: 'ITU-R SM.329 category A',
  source: 'ITU Radio Regulations, Appendix 3; ITU-R SM.329',
  edition: 'category A',
  certainty: 'read in quotation',
  note:
    'The numbers were read in quotations, the wording of the tables is from memory. The power is the peak envelope power; ' +
    'a steady carrier has the same mean power.',
  clauses: [
    {
      name: 'ITU-R SM.329 category A, amateur below 30 MHz',
      certainty: 'read in quotation',
      covers: ({ txFreqHz }) => txFreqHz < 30e6,
      requiredDb: ({ powerW }) => Math.min(43 + 10 * Math.log10(powerW), 50),
    },
    {
      name: 'ITU-R SM.329 category A, general above 30 MHz',
      certainty: 'read in quotation',
      covers: ({ txFreqHz }) => txFreqHz >= 30e6,
      requiredDb: ({ powerW }) => Math.min(43 + 10 * Math.log10(powerW), 70),
    },
  ],
};

const AUSTRIA: LimitRule = {
  key: 'at_afv_17',
  title: 'AFV § 17 (Austria)',
  source: 'Amateurfunkverordnung (Austria), § 17',
  edition: 'as read',
  certainty: 'read',
  note:
    'Goes by the frequency of the product. The argument f/35 between 35 and 50 MHz was an image and is inferred from the ' +
    'continuity from 40 to 60 dB. A frequency on the border of two rows takes the stricter one.',
  clauses: [
    {
      name: 'AFV § 17, 0.15 to 1.7 MHz',
      certainty: 'read',
      covers: (args) => productHz(args) >= 150e3 && productHz(args) <= 1.7e6,
      requiredDb: ({ powerW }) => Math.min(60, downTo(-36, powerW)),
    },
    {
      name: 'AFV § 17, 1.7 to 35 MHz',
      certainty: 'read',
      covers: (args) => productHz(args) > 1.7e6 && productHz(args) < 35e6,
      requiredDb: () => 40,
    },
    {
      name: 'AFV § 17, 35 to 50 MHz',
      certainty: 'read',
      covers: (args) => productHz(args) >= 35e6 && productHz(args) < 50e6,
      requiredDb: (args) => 40 + 129.1 * Math.log10(productHz(args) / 35e6),
    },
    {
      name: 'AFV § 17, 50 MHz to 1 GHz',
      certainty: 'read',
      covers: (args) => productHz(args) >= 50e6 && productHz(args) <= 1e9,
      requiredDb: () => 60,
    },
    {
      name: 'AFV § 17, above 1 GHz',
      certainty: 'read',
      covers: (args) => productHz(args) > 1e9,
      requiredDb: ({ powerW }) => downTo(-30, powerW),
    },
  ],
};

const STRICTEST: LimitRule = {
  key: 'strictest',
  title: 'The strictest of all rules here',
  source: [US, ITU, AUSTRIA].map((rule) => rule.source).join('; '),
  edition: 'each as stated',
  certainty: 'read in quotation',
  note: 'For a unit without a buyer. A rule that says nothing for the product is left out.',
  clauses: [],
};

/** The rules that ship. Limits of ETSI EN 301 783 were not read and are not among them. */
export const LIMIT_RULES: Record<LimitRuleKey, LimitRule> = {
  us_97_307: US,
  itu_category_a: ITU,
  at_afv_17: AUSTRIA,
  strictest: STRICTEST,
};

const UNITED_STATES = new Set(['US', 'PR', 'VI', 'GU', 'AS', 'MP', 'UM']);

/**
 * Rule by where the unit goes: the United States and its territories, Austria, ITU category A elsewhere, the
 * strictest of all without a destination. @param countryCode ISO 3166-1 alpha-2 or null
 */
export function ruleForDestination(countryCode: string | null): LimitRuleKey {
  if (countryCode === null) return 'strictest';
  const code = countryCode.toUpperCase();
  if (UNITED_STATES.has(code)) return 'us_97_307';
  return code === 'AT' ? 'at_afv_17' : 'itu_category_a';
}

function limitOf(rule: LimitRule, args: LimitArgs): LimitResult {
  const clause = rule.clauses.find((each) => each.covers(args));
  if (clause === undefined) {
    return {
      ok: false,
      reason: `${rule.title} says nothing for this frequency; state the product's frequency.`,
    };
  }
  const requiredDb = clause.requiredDb(args);
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
export function limitDbc(ruleKey: LimitRuleKey, args: LimitArgs): LimitResult {
  if (!(args.powerW > 0) || !Number.isFinite(args.powerW)) {
    return {
      ok: false,
      reason: 'The limit depends on the measured power of the fundamental: measure that first.',
    };
  }
  if (ruleKey !== 'strictest') return limitOf(LIMIT_RULES[ruleKey], args);
  let strictest: LimitResult = { ok: false, reason: 'No rule here covers this frequency.' };
  for (const rule of [US, ITU, AUSTRIA]) {
    const limit = limitOf(rule, args);
    if (limit.ok && (!strictest.ok || limit.limitDbc < strictest.limitDbc)) strictest = limit;
  }
  return strictest;
}

/**
 * How far the limit in dBc moves with the power: dB per dB, the larger of the slopes to either side. 0 for a
 * fixed attenuation, up to 1 where the limit is an absolute level.
 */
export function limitSlope(ruleKey: LimitRuleKey, args: LimitArgs): number {
  const stepDb = 0.01;
  const at = (shiftDb: number): number | null => {
    const limit = limitDbc(ruleKey, { ...args, powerW: dbmToW(wToDbm(args.powerW) + shiftDb) });
    return limit.ok ? limit.limitDbc : null;
  };
  const here = at(0);
  const below = at(-stepDb);
  const above = at(stepDb);
  if (here === null || below === null || above === null) return 0;
  return Math.max(Math.abs(here - below), Math.abs(above - here)) / stepDb;
}
