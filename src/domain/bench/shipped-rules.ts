import type { LimitClause, LimitRule } from './limit-rules';

const open = { validFrom: null, validTo: null, isElsewhere: false, isAutomatic: true } as const;

const byTransmit = (
  clause: Pick<LimitClause, 'name' | 'certainty' | 'requiredDb'> & Partial<LimitClause>,
) => ({
  by: 'transmit' as const,
  fromHz: null,
  toHz: null,
  ...clause,
});

const US: LimitRule = {
  ...open,
  key: 'us_97_307',
  title: '47 CFR 97.307(d), (e)',
  source: '47 CFR 97.307',
  edition: 'as amended for transmitters installed after 1 January 2003',
  certainty: 'read',
  note: 'The transmit frequency decides between (d) and (e), not that of the product. No reference bandwidth is given.',
  destinations: ['US', 'PR', 'VI', 'GU', 'AS', 'MP', 'UM'],
  clauses: [
    byTransmit({ name: '47 CFR 97.307(d)', certainty: 'read', toHz: 30e6, requiredDb: '43' }),
    byTransmit({
      name: '47 CFR 97.307(e)',
      certainty: 'read',
      fromHz: 30e6,
      toHz: 225e6,
      toInclusive: true,
      // 60 dB; up to 25 W at most 25 µW and 40 dB down, but nothing need go below 10 µW.
      requiredDb: 'min(60, 10 * lg(P / max(10e-6, min(25e-6, P * 1e-4))))',
    }),
  ],
};

const US_BEFORE_2003: LimitRule = {
  ...open,
  key: 'us_97_307_before_2003',
  title: '47 CFR 97.307(d), installed by 1 January 2003',
  source: '47 CFR 97.307(d)',
  edition: 'for transmitters installed on or before 1 January 2003',
  certainty: 'read',
  note:
    'For reference only: a rig that is built now is never judged by it. Built before 15 April 1977, or first marketed ' +
    'before 1 January 1978, is exempt.',
  destinations: [],
  isAutomatic: false,
  clauses: [
    byTransmit({
      name: '47 CFR 97.307(d), under 5 W',
      certainty: 'read',
      toHz: 30e6,
      underW: 5,
      requiredDb: 'max(30, 10 * lg(P / 50e-3))',
    }),
    byTransmit({
      name: '47 CFR 97.307(d)',
      certainty: 'read',
      toHz: 30e6,
      requiredDb: 'max(40, 10 * lg(P / 50e-3))',
    }),
  ],
};

const ITU: LimitRule = {
  ...open,
  key: 'itu_category_a',
  title: 'ITU-R SM.329 category A',
  source: 'ITU Radio Regulations, Appendix 3; ITU-R SM.329',
  edition: 'category A',
  certainty: 'read in quotation',
  note:
    'The numbers were read in quotations, the wording of the tables is from memory. The power is the peak envelope power; ' +
    'a steady carrier has the same mean power.',
  destinations: [],
  isElsewhere: true,
  clauses: [
    byTransmit({
      name: 'ITU-R SM.329 category A, amateur below 30 MHz',
      certainty: 'read in quotation',
      toHz: 30e6,
      requiredDb: 'min(43 + 10 * lg(P), 50)',
    }),
    byTransmit({
      name: 'ITU-R SM.329 category A, general above 30 MHz',
      certainty: 'read in quotation',
      fromHz: 30e6,
      requiredDb: 'min(43 + 10 * lg(P), 70)',
    }),
  ],
};

const product = (
  name: string,
  fromHz: number,
  toHz: number | null,
  requiredDb: string,
  toInclusive = false,
): LimitClause => ({ name, certainty: 'read', by: 'product', fromHz, toHz, toInclusive, requiredDb });

const AUSTRIA: LimitRule = {
  ...open,
  key: 'at_afv_17',
  title: 'AFV § 17 (Austria)',
  source: 'Amateurfunkverordnung (Austria), § 17',
  edition: 'as read',
  certainty: 'read',
  note:
    'Goes by the frequency of the product. The argument f/35 between 35 and 50 MHz was an image and is inferred from the ' +
    'continuity from 40 to 60 dB. A frequency on the border of two rows takes the stricter one.',
  destinations: ['AT'],
  clauses: [
    product('AFV § 17, 0.15 to 1.7 MHz', 150e3, 1.7e6, 'min(60, 10 * lg(P / 1e-3) + 36)', true),
    product('AFV § 17, 1.7 to 35 MHz', 1.7e6, 35e6, '40'),
    product('AFV § 17, 35 to 50 MHz', 35e6, 50e6, '40 + 129.1 * lg(fp / 35e6)'),
    product('AFV § 17, 50 MHz to 1 GHz', 50e6, 1e9, '60', true),
    product('AFV § 17, above 1 GHz', 1e9, null, '10 * lg(P / 1e-3) + 30'),
  ],
};

/** The rules that ship. Limits of ETSI EN 301 783 were not read and are not among them. */
export const SHIPPED_RULES: readonly LimitRule[] = [US, ITU, AUSTRIA, US_BEFORE_2003];
