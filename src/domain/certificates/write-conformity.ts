import { bandLabel } from '~/domain/bench/bands';
import { isLegal } from '~/domain/bench/judge-run';
import type { ChosenRule, TextCertainty } from '~/domain/bench/limit-rules';
import type { BandKey, TestPoint } from '~/domain/bench/types';
import { listed } from '~/lib/listed';
import type { JudgedPoint } from './write-statement';

/** What the words around a run's verdicts are written from. */
export interface ConformityFacts {
  points: readonly JudgedPoint[];
  /** Points of the plan at which nothing was read. */
  unread: readonly TestPoint[];
  /** What was swept of the spectrum, a row for each band. */
  spans: readonly { band: BandKey | null; fromHz: number; toHz: number }[];
  rule: ChosenRule;
  destinationCountry: string | null;
}

/** The countries of Europe and its islands, ISO 3166-1 alpha-2, from memory: where EN 301 783 may be asked for. */
const EUROPE = new Set(
  (
    'AD AL AT AX BA BE BG BY CH CY CZ DE DK EE ES FI FO FR GB GG GI GR HR HU IE IM IS IT JE LI LT LU LV MC MD ME MK ' +
    'MT NL NO PL PT RO RS RU SE SI SJ SK SM TR UA VA XK'
  ).split(' '),
);

/**
 * What is met: which harmonics and products on which bands by which rule, and which of the works' own limits. What is
 * not met, or not surely, is named with them; only what was judged is said to be inside anything.
 */
export function writeConformity({ points, rule, destinationCountry, spans }: ConformityFacts): string[] {
  const legal = points.filter(({ point }) => isLegal(point));
  const own = points.filter(({ point }) => !isLegal(point));
  const met = legal.filter(({ judgement }) => judgement.verdict === 'pass');
  const where =
    destinationCountry === null ? 'for a unit without a buyer' : `for the destination ${destinationCountry}`;
  const sentences: string[] = [];
  if (met.length > 0) {
    sentences.push(
      `${capital(productsOf(met))} ${met.length === 1 ? 'is' : 'are each'} inside ${rule.title} (${rule.source}) ` +
        `at the measured power by more than its expanded uncertainty, ${where}.`,
    );
  }
  if (spans.length > 0 && met.some(({ point }) => point.quantity.order === null)) {
    sentences.push(`Other products were looked for in the sweep ${listed(spans.map(spanWords))}.`);
  }
  const inside = own.filter(({ judgement }) => judgement.verdict === 'pass');
  if (inside.length > 0) {
    const names = namesOf(inside, own);
    sentences.push(`The ${listed(names)} ${names.length === 1 ? 'is' : 'are'} inside the works’ own limits.`);
  }
  const conceded = points.filter(({ concession, judgement }) => concession !== null && isOpen(judgement));
  if (conceded.length > 0) {
    sentences.push(`Not met, and let go by concession of the owner: ${pointList(conceded)}.`);
  }
  const open = points.filter(({ concession, judgement }) => concession === null && isOpen(judgement));
  if (open.length > 0) sentences.push(`Not stated as met: ${pointList(open)}.`);
  return sentences.length > 0 ? sentences : ['Nothing is stated as met: no limit applies to what was read.'];
}

/** What was not assessed, and how sure the texts of the rules are. */
export function writeNotAssessed({ points, unread, rule, destinationCountry }: ConformityFacts): string[] {
  const legal = points.filter(({ point }) => isLegal(point));
  const withoutLimit = points.filter(
    ({ judgement }) => judgement.verdict === 'not_run' && judgement.stopped === null,
  );
  const stopped = points.filter(
    ({ judgement }) => judgement.verdict === 'not_run' && judgement.stopped !== null,
  );
  return [
    ...harmonicsAbove(legal),
    ...(legal.some(({ point }) => point.quantity.order === null)
      ? []
      : [
          legal.length === 0
            ? 'Emissions were not assessed.'
            : 'Products other than the harmonics named were not assessed.',
        ]),
    ...(unread.length === 0 ? [] : [`Not measured: ${unread.map(nameOf).join('; ')}.`]),
    ...(withoutLimit.length === 0 ? [] : [`For information, without a limit: ${pointList(withoutLimit)}.`]),
    ...(stopped.length === 0 ? [] : [`Read, but not judged: ${pointList(stopped)}.`]),
    ...(destinationCountry === null || EUROPE.has(destinationCountry) ? ['Not assessed to EN 301 783.'] : []),
    ...(legal.length === 0
      ? []
      : rule.rules
          .filter(({ certainty }) => certainty !== 'read')
          .map(({ title, certainty }) => `The text of ${title} was taken ${certaintyWords(certainty)}.`)),
  ];
}

function certaintyWords(certainty: TextCertainty): string {
  if (certainty === 'read in quotation') return 'from quotation';
  return certainty === 'entered' ? 'as the works has entered it' : 'from memory';
}

/** Measured against a limit that it does not, or not surely, meet. */
function isOpen({ verdict }: JudgedPoint['judgement']): boolean {
  return verdict === 'fail' || verdict === 'too_close';
}

function nameOf({ quantity, band }: TestPoint): string {
  return band === null ? quantity.label : `${quantity.label}, ${bandLabel(band)}`;
}

function pointList(points: readonly JudgedPoint[]): string {
  return points.map(({ point }) => nameOf(point)).join('; ');
}

/** Bands by what holds on each of them, in the order in which they come. */
function bandsBy(points: readonly JudgedPoint[], keyOf: (ofBand: JudgedPoint[]) => string) {
  const bands = new Map<BandKey | null, JudgedPoint[]>();
  for (const each of points) {
    const { band } = each.point;
    bands.set(band, [...(bands.get(band) ?? []), each]);
  }
  const groups = new Map<string, { bands: (BandKey | null)[]; points: JudgedPoint[] }>();
  for (const [band, ofBand] of bands) {
    const group = groups.get(keyOf(ofBand)) ?? { bands: [], points: ofBand };
    group.bands.push(band);
    groups.set(keyOf(ofBand), group);
  }
  return [...groups.values()].map((group) => ({
    ...group,
    on: listed(group.bands.flatMap((band) => (band === null ? [] : [bandLabel(band)]))),
  }));
}

/** `on 40 m and 30 m the 2nd to 7th harmonic, on 10 m the 2nd and 3rd harmonic`: each band with what was read on it. */
function productsOf(points: readonly JudgedPoint[]): string {
  const keyOf = (ofBand: JudgedPoint[]) =>
    ofBand
      .map(({ point }) => point.quantity.key)
      .sort()
      .join();
  return listed(
    bandsBy(points, keyOf).map(({ on, points: ofBand }) => {
      const orders = ofBand.flatMap(({ point }) => point.quantity.order ?? []).sort((a, b) => a - b);
      const others = ofBand
        .filter(({ point }) => point.quantity.order === null)
        .map(({ point }) =>
          point.quantity.key === 'spurious' ? 'strongest other product' : inText(point.quantity.label),
        );
      const what = [
        ...(orders.length > 0 ? [`the ${ordersInWords(orders)} harmonic`] : []),
        ...others.map((label) => `the ${label}`),
      ];
      return on === '' ? listed(what) : `on ${on} ${listed(what)}`;
    }),
  );
}

/** `2nd to 7th` where none is left out between, `2nd, 3rd and 5th` otherwise. */
function ordersInWords(orders: readonly number[]): string {
  const [first = 0] = orders;
  const isUnbroken = orders.length > 2 && orders.every((order, at) => order === first + at);
  return isUnbroken ? `${ordinal(first)} to ${ordinal(orders.at(-1) ?? first)}` : listed(orders.map(ordinal));
}

function harmonicsAbove(legal: readonly JudgedPoint[]): string[] {
  const highest = (ofBand: readonly JudgedPoint[]) =>
    Math.max(...ofBand.map(({ point }) => point.quantity.order ?? 0));
  const groups = bandsBy(
    legal.filter(({ point }) => point.quantity.order !== null),
    (ofBand) => String(highest(ofBand)),
  );
  if (groups.length === 0) return [];
  const [only] = groups;
  if (groups.length === 1 && only !== undefined) {
    return [`Harmonics above the ${ordinal(highest(only.points))} were not assessed.`];
  }
  const each = groups.map(({ on, points }) => `above the ${ordinal(highest(points))} on ${on}`);
  return [`Harmonics ${listed(each)} were not assessed.`];
}

/** Quantities by name; one that does not hold on all of its bands with those on which it does. */
function namesOf(inside: readonly JudgedPoint[], all: readonly JudgedPoint[]): string[] {
  const keys = [...new Set(inside.map(({ point }) => point.quantity.key))];
  return keys.map((key) => {
    const met = inside.filter(({ point }) => point.quantity.key === key);
    const label = inText(met[0]?.point.quantity.label ?? key);
    const isWhole = met.length === all.filter(({ point }) => point.quantity.key === key).length;
    const bands = met.flatMap(({ point }) => (point.band === null ? [] : [bandLabel(point.band)]));
    return isWhole || bands.length === 0 ? label : `${label} on ${listed(bands)}`;
  });
}

function spanWords({ band, fromHz, toHz }: ConformityFacts['spans'][number]): string {
  const span = `from ${megahertz(fromHz)} to ${megahertz(toHz)} MHz`;
  return band === null ? span : `${span} on ${bandLabel(band)}`;
}

function megahertz(freqHz: number): string {
  return String(Number((freqHz / 1e6).toFixed(3)));
}

function ordinal(order: number): string {
  if (order === 2) return '2nd';
  return order === 3 ? '3rd' : `${order}th`;
}

/** `Current, key down` within a sentence: `current key down`; abbreviations keep their capitals. */
function inText(label: string): string {
  const plain = label.replace(',', '');
  return /^[A-Z]{2}/u.test(plain) ? plain : plain.charAt(0).toLowerCase() + plain.slice(1);
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
