import type { OrderPlacing } from '~/schemas/order-placing';
import type { Random } from './random';

/** Who orders, and where it goes. */
export type DemoBuyer = Pick<
  OrderPlacing,
  'name' | 'email' | 'callSign' | 'phone' | 'addressLines' | 'city' | 'region' | 'postcode' | 'country'
>;

const first =
  'Anselm Birgit Caspian Delphine Edda Fenno Greer Hollis Imre Jorunn Kestrel Lovisa Milo Nerys Oswin Petra Quill Rosalind Sorrel Tibor Una Vesper Wilmot Xenia Yorick Zelda Alaric Brisa Corin Dagny'.split(
    ' ',
  );
const last =
  'Ashgrove Blackmere Cotterell Dunmoor Elverstone Farrowby Glimsdal Hathersedge Ingleberg Jorvale Kestermann Lindqvale Mossbridge Norrfelt Oxenholt Penhallick Quarrendon Ravnsborg Stellwagen Thornquist Umberleigh Vintersol Wetherlam Yarrowdale Zimmerhald'.split(
    ' ',
  );
const streets =
  'Lantern Row,Cooper’s Steps,Weir Walk,Heron Lane,Old Mast Road,Kiln Yard,Sandpiper Close,Beacon Hill,Mill Race,Fuller’s Court'.split(
    ',',
  );
const towns =
  'Selmouth Ardenhame Kvistby Oberlauen Marrowgate Tarnholt Nieuwendrecht Valbrune Eskerfield Hollowick'.split(
    ' ',
  );

/** How an address of each country is written; no postcode among them is given out. */
const countries: Readonly<
  Record<string, { postcode: (digits: string) => string; region?: string; weight: number }>
> = {
  GB: { postcode: (n) => `NS${n.charAt(0)} ${n.charAt(1)}QA`, weight: 6 },
  DE: { postcode: (n) => `00${n}`, weight: 6 },
  US: { postcode: (n) => `000${n.slice(0, 2)}`, region: 'Eastmarch', weight: 7 },
  SE: { postcode: (n) => `00${n.charAt(0)} ${n.slice(1)}`, weight: 2 },
  NL: { postcode: (n) => `0${n} QQ`, weight: 2 },
  FR: { postcode: (n) => `00${n}`, weight: 2 },
  JP: { postcode: (n) => `000-0${n}`, weight: 2 },
  AU: { postcode: (n) => `0${n}`, region: 'Southern Reach', weight: 2 },
  CA: { postcode: (n) => `Q${n.charAt(0)}Q ${n.charAt(1)}Q${n.charAt(2)}`, region: 'Lower Fjord', weight: 2 },
  NZ: { postcode: (n) => `0${n}`, weight: 1 },
  AT: { postcode: (n) => `0${n}`, weight: 0 },
};

const drawn = Object.entries(countries).flatMap(([country, { weight }]) =>
  Array<string>(weight).fill(country),
);
const letters = 'A B C D E F G H I J K L M N O P R S T U V W X Y Z'.split(' ');

/** Buyers without end, each with a call sign that is never given out. */
export function buyerSource(random: Random): (over?: Partial<DemoBuyer>) => DemoBuyer {
  const known = new Set<string>();
  return (over = {}) => {
    const callSign = newCallSign(random, known);
    const country = over.country ?? random.pick(drawn);
    const form = countries[country];
    const digits = String(random.whole(100, 999));
    return {
      name: `${random.pick(first)} ${random.pick(last)}`,
      email: `${callSign.toLowerCase()}@${random.pick(['mail.example', 'radio.example', 'post.test'])}`,
      callSign,
      phone: random.chance(0.3) ? `+00 000 ${random.whole(100_000, 999_999)}` : null,
      addressLines: [`${random.whole(1, 140)} ${random.pick(streets)}`],
      city: random.pick(towns),
      region: form?.region ?? '',
      postcode: form?.postcode(digits) ?? '',
      country,
      ...over,
    };
  };
}

function newCallSign(random: Random, known: Set<string>): string {
  for (;;) {
    const suffix = Array.from({ length: random.whole(2, 3) }, () => random.pick(letters)).join('');
    const callSign = `Q${random.whole(1, 9)}${suffix}`;
    if (known.has(callSign)) continue;
    known.add(callSign);
    return callSign;
  }
}
