import type { BandKey, Region } from './types';

/** Edges in Hz, inclusive at both ends; null where the Region has no allocation. */
type Edges = readonly [lowHz: number, highHz: number];

/**
 * Band edges by ITU Region. 160, 80, 40 (Region 2), 30, 20, 17, 15 m and 6 m (Regions 2 and 3) after the columns of 47 CFR
 * 97.301; 60, 40 (Regions 1 and 3), 12, 10 and 6 m (Region 1) from memory of the Radio Regulations, article 5.
 * A national licence may be narrower.
 */
const EDGES: Record<BandKey, Record<Region, Edges>> = {
  '160m': { 1: [1_810_000, 1_850_000], 2: [1_800_000, 2_000_000], 3: [1_800_000, 2_000_000] },
  '80m': { 1: [3_500_000, 3_800_000], 2: [3_500_000, 4_000_000], 3: [3_500_000, 3_900_000] },
  '60m': { 1: [5_351_500, 5_366_500], 2: [5_351_500, 5_366_500], 3: [5_351_500, 5_366_500] },
  '40m': { 1: [7_000_000, 7_200_000], 2: [7_000_000, 7_300_000], 3: [7_000_000, 7_200_000] },
  '30m': { 1: [10_100_000, 10_150_000], 2: [10_100_000, 10_150_000], 3: [10_100_000, 10_150_000] },
  '20m': { 1: [14_000_000, 14_350_000], 2: [14_000_000, 14_350_000], 3: [14_000_000, 14_350_000] },
  '17m': { 1: [18_068_000, 18_168_000], 2: [18_068_000, 18_168_000], 3: [18_068_000, 18_168_000] },
  '15m': { 1: [21_000_000, 21_450_000], 2: [21_000_000, 21_450_000], 3: [21_000_000, 21_450_000] },
  '12m': { 1: [24_890_000, 24_990_000], 2: [24_890_000, 24_990_000], 3: [24_890_000, 24_990_000] },
  '10m': { 1: [28_000_000, 29_700_000], 2: [28_000_000, 29_700_000], 3: [28_000_000, 29_700_000] },
  '6m': { 1: [50_000_000, 52_000_000], 2: [50_000_000, 54_000_000], 3: [50_000_000, 54_000_000] },
};

/** Every band, longest wave first. */
export const BAND_KEYS: readonly BandKey[] = [
  '160m',
  '80m',
  '60m',
  '40m',
  '30m',
  '20m',
  '17m',
  '15m',
  '12m',
  '10m',
  '6m',
];

/** `40 m` for `40m`. */
export function bandLabel(band: BandKey): string {
  return band.replace('m', ' m');
}

/** Band that holds the frequency in the Region; null where none does. @param freqHz Hz */
export function bandOf(freqHz: number, region: Region): BandKey | null {
  return (
    BAND_KEYS.find((band) => {
      const [lowHz, highHz] = EDGES[band][region];
      return freqHz >= lowHz && freqHz <= highHz;
    }) ?? null
  );
}

/** What a band holds in every Region, Hz. */
export function commonEdges(band: BandKey): { lowHz: number; highHz: number } {
  const all = Object.values(EDGES[band]);
  return {
    lowHz: Math.max(...all.map(([lowHz]) => lowHz)),
    highHz: Math.min(...all.map(([, highHz]) => highHz)),
  };
}

/** Band that holds all of an emission, from its lowest to its highest frequency (Hz), in the Region. */
export function bandOfEmission(lowHz: number, highHz: number, region: Region): BandKey | null {
  const band = bandOf(lowHz, region);
  return band !== null && band === bandOf(highHz, region) ? band : null;
}

// Radio Regulations, article 5, nos. 5.2 to 5.9, by country, from memory. Territories far from their country have a
// code and a Region of their own (Hawaii belongs to the code US and lies in Region 2).
const REGION_1 =
  'AD AE AL AM AO AT AX AZ BA BE BF BG BH BI BJ BW BY CD CF CG CH CI CM CV CY CZ DE DJ DK DZ EE EG EH ER ES ET FI FO FR ' +
  'GA GB GE GG GH GI GM GN GQ GR GW HR HU IE IL IM IQ IS IT JE JO KE KG KM KW KZ LB LI LR LS LT LU LV LY MA MC MD ME ' +
  'MG MK ML MN MR MT MU MW MZ NA NE NG NL NO OM PL PS PT QA RE RO RS RU RW SA SC SD SE SH SI SJ SK SL SM SN SO SS ST ' +
  'SY SZ TD TG TJ TM TN TR TZ UA UG UZ VA XK YE YT ZA ZM ZW';
const REGION_2 =
  'AG AI AR AW BB BL BM BO BQ BR BS BZ CA CL CO CR CU CW DM DO EC FK GD GF GL GP GT GY HN HT JM KN KY LC MF MQ MS MX NI ' +
  'PA PE PM PR PY SR SV SX TC TT US UY VC VE VG VI';
const REGION_3 =
  'AF AS AU BD BN BT CC CK CN CX FJ FM GU HK ID IN IR JP KH KI KP KR LA LK MH MM MO MP MV MY NC NF NP NR NU NZ PF PG PH ' +
  'PK PN PW SB SG TH TK TL TO TV TW VN VU WF WS';

const REGION_BY_COUNTRY = new Map<string, Region>([
  ...REGION_1.split(' ').map((code): [string, Region] => [code, 1]),
  ...REGION_2.split(' ').map((code): [string, Region] => [code, 2]),
  ...REGION_3.split(' ').map((code): [string, Region] => [code, 3]),
]);

/** ITU Region of a country; null for a code that is not in the table. @param countryCode ISO 3166-1 alpha-2 */
export function regionOf(countryCode: string): Region | null {
  return REGION_BY_COUNTRY.get(countryCode.toUpperCase()) ?? null;
}

/**
 * What a unit's destination leaves open, as a sentence; null where nothing is. A code that is in no table is judged by the
 * rule for elsewhere, and in no Region are its bands' edges known.
 */
export function destinationNote(countryCode: string | null): string | null {
  if (countryCode === null || regionOf(countryCode) !== null) return null;
  return 'Its ITU Region is not known here: the rule for elsewhere applies, and band edges are not checked.';
}
