import { parts } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';

/** A part of the demo works, with what its lots look like. */
export interface DemoPart {
  number: string;
  description: string;
  value: string;
  footprint: string;
  unit: 'piece' | 'mm';
  trace: 'each' | 'batch';
  hsCode: string;
  originCountry: string;
  /** For one, in hundredths of a minor unit. */
  priceCents100: number;
  /** Received in multiples of this. */
  pack: number;
  supplier: 0 | 1 | 2;
  bin: string;
}

const resistorValues =
  '10R 22R 47R 51R 100R 150R 220R 330R 470R 680R 1K 1K5 2K2 3K3 4K7 6K8 10K 15K 22K 47K 100K 220K 470K 1M'.split(
    ' ',
  );
const ceramicValues = '22P 33P 47P 68P 100P 150P 220P 330P 470P 680P 820P 1N 2N2 10N 22N 100N 1U'.split(' ');
const silverMicaValues = '100P 150P 180P 220P 270P 330P 390P 470P 560P 680P 820P 1N'.split(' ');
const electrolyticValues = '4U7 10U 47U 100U 470U'.split(' ');
const inductorValues = '1U 4U7 10U 47U 100U 1M'.split(' ');

type Row = readonly [
  number: string,
  description: string,
  value: string,
  footprint: string,
  hsCode: string,
  priceCents100: number,
];

/** Those whose lot is scanned into every unit: boards, crystals, output transistors. */
const scanned: readonly Row[] = [
  ['PCB-V4-MAIN', 'Main board, Voe 40, populated by an assembler', 'rev 3', '120 × 80 mm', '853400', 260_000],
  ['PCB-H3-MAIN', 'Main board, Holm 3, populated by an assembler', 'rev 5', '160 × 90 mm', '853400', 410_000],
  ['PCB-H3-BANDS', 'Band board, Holm 3, bare', 'rev 4', '150 × 60 mm', '853400', 64_000],
  [
    'PCB-S5-MAIN',
    'Main board, Skerry 5, populated by an assembler',
    'rev 2',
    '180 × 100 mm',
    '853400',
    520_000,
  ],
  ['PCB-S5-BANDS', 'Band board, Skerry 5, bare', 'rev 2', '180 × 70 mm', '853400', 78_000],
  ['FET-N-RF-TO220', 'Power FET for the transmitter output, n-channel', '100 V', 'TO-220', '854129', 31_000],
  ['TRN-NPN-RF-TO126', 'RF driver transistor, npn', '1.5 A', 'TO-126', '854129', 9_800],
  [
    'XTAL-4M9152-HC49U',
    'Crystal for the ladder filter, matched by the works',
    '4.9152 MHz',
    'HC-49/U',
    '854160',
    4_200,
  ],
  [
    'XTAL-25M-TCXO',
    'Reference oscillator, temperature compensated',
    '25 MHz, 1 ppm',
    '3.2 × 2.5 mm',
    '854160',
    24_000,
  ],
];

const loose: readonly Row[] = [
  ['TOR-37-2', 'Powdered-iron toroid, 9.5 mm, mix 2', 'A_L 4.0', '9.5 mm', '850490', 3_400],
  ['TOR-37-6', 'Powdered-iron toroid, 9.5 mm, mix 6', 'A_L 3.0', '9.5 mm', '850490', 3_400],
  ['TOR-50-2', 'Powdered-iron toroid, 12.7 mm, mix 2', 'A_L 4.9', '12.7 mm', '850490', 5_200],
  ['TOR-50-6', 'Powdered-iron toroid, 12.7 mm, mix 6', 'A_L 4.0', '12.7 mm', '850490', 5_200],
  ['TOR-37-43', 'Ferrite toroid, 9.5 mm, mix 43', 'A_L 420', '9.5 mm', '850490', 3_900],
  ['TOR-50-43', 'Ferrite toroid, 12.7 mm, mix 43', 'A_L 523', '12.7 mm', '850490', 5_900],
  ['BEAD-1206-600R', 'Ferrite bead', '600 Ω at 100 MHz', '1206', '850450', 900],
  ['TRIM-5-50P', 'Ceramic trimmer', '5–50 pF', '7 mm', '853230', 5_600],
  ['TRN-NPN-SS-SOT23', 'Small-signal transistor, npn', '40 V', 'SOT-23', '854121', 700],
  ['TRN-PNP-SS-SOT23', 'Small-signal transistor, pnp', '40 V', 'SOT-23', '854121', 700],
  ['FET-N-SW-SOT23', 'Switching FET, n-channel', '60 V', 'SOT-23', '854121', 900],
  ['FET-J-N-SOT23', 'Junction FET, n-channel', '25 V', 'SOT-23', '854121', 2_900],
  ['FET-P-PWR-SO8', 'Power FET, p-channel, key line and reverse polarity', '30 V', 'SO-8', '854129', 7_400],
  ['DIO-SW-SOD123', 'Switching diode', '100 V', 'SOD-123', '854110', 500],
  ['DIO-SCH-SMA', 'Schottky diode', '40 V 3 A', 'SMA', '854110', 1_400],
  ['DIO-ZEN-33V', 'Zener diode, protects the output transistor', '33 V 3 W', 'DO-41', '854110', 2_600],
  ['DIO-PIN-SOT23', 'PIN diode pair', '50 V', 'SOT-23', '854110', 2_700],
  ['IC-OPAMP-DUAL-SO8', 'Dual operational amplifier', '', 'SO-8', '854233', 3_700],
  ['IC-OPAMP-LN-SO8', 'Dual operational amplifier, low noise', '', 'SO-8', '854233', 11_800],
  ['IC-SWITCH-SO16', 'Analogue switch for the mixer', '', 'SO-16', '854239', 6_200],
  ['IC-MIXER-SO8', 'Double-balanced mixer', '', 'SO-8', '854239', 17_900],
  ['IC-AFAMP-SO8', 'Audio amplifier', '0.5 W', 'SO-8', '854233', 5_200],
  ['IC-REG-5V-TO252', 'Regulator', '5 V', 'TO-252', '854239', 4_100],
  ['IC-REG-3V3-SOT223', 'Regulator', '3.3 V', 'SOT-223', '854239', 3_300],
  ['IC-REG-8V-SOT89', 'Regulator', '8 V', 'SOT-89', '854239', 3_300],
  ['IC-CLKGEN-MSOP10', 'Clock generator, three outputs', '', 'MSOP-10', '854239', 12_500],
  [
    'IC-MCU-32-TQFP32',
    'Microcontroller of the rig, programmed by the works',
    '32 KiB',
    'TQFP-32',
    '854231',
    28_000,
  ],
  [
    'IC-MCU-8-SO14',
    'Microcontroller of the keyer, programmed by the works',
    '8 KiB',
    'SO-14',
    '854231',
    11_000,
  ],
  ['IC-LOGIC-HEX-SO14', 'Hex inverter, drives the output stage', '', 'SO-14', '854239', 3_900],
  ['IC-EEPROM-SO8', 'Serial memory', '32 KiB', 'SO-8', '854232', 4_300],
  ['REL-DPDT-5V', 'Signal relay, two changeover contacts', '5 V', 'DIL', '853641', 16_000],
  ['CON-BNC-PCB', 'Aerial socket', '50 Ω', 'BNC', '853669', 19_000],
  ['CON-JACK-35', 'Jack socket, 3.5 mm, stereo', '', 'panel', '853669', 6_100],
  ['CON-DC-BARREL', 'Power socket, barrel', '2.1 mm', 'panel', '853669', 5_800],
  ['CON-DC-LOCK', 'Power socket, locking', '4-pin', 'panel', '853669', 23_000],
  ['CON-HDR-2X10', 'Board-to-board header', '2 × 10', '2.54 mm', '853669', 7_800],
  ['CON-FFC-16', 'Flat-cable connector', '16-way', '1 mm', '853669', 6_400],
  ['POT-10K-LOG', 'Potentiometer, logarithmic', '10 kΩ', '9 mm', '853340', 9_200],
  ['POT-10K-LIN', 'Potentiometer, linear', '10 kΩ', '9 mm', '853340', 9_200],
  ['POT-TRIM-1K', 'Trimmer resistor', '1 kΩ', '3314', '853340', 4_600],
  ['ENC-ROT-24', 'Rotary encoder with push switch', '24 steps', 'panel', '854370', 31_000],
  ['DISP-OLED-128X32', 'Display, one line', '128 × 32', 'module', '852491', 62_000],
  ['DISP-OLED-128X64', 'Display', '128 × 64', 'module', '852491', 88_000],
  ['LED-3MM-AMBER', 'Band lamp', 'amber', '3 mm', '854141', 1_300],
  ['SWITCH-TACT-6', 'Push switch', '', '6 mm', '853650', 1_900],
  ['FUSE-PTC-1A5', 'Resettable fuse', '1.5 A', '1812', '853610', 4_300],
  ['KNOB-15', 'Knob, 15 mm, pointer', '6 mm shaft', '', '392690', 11_000],
  ['KNOB-TUNING-30', 'Tuning knob, 30 mm, with finger dimple', '6 mm shaft', '', '761699', 42_000],
  ['KNOB-TUNING-40', 'Tuning knob, 40 mm, with finger dimple', '6 mm shaft', '', '761699', 56_000],
  ['CASE-V4', 'Case, Voe 40', '130 × 56 mm', '', '852990', 210_000],
  ['CASE-H3', 'Case, Holm 3', '176 × 66 mm', '', '852990', 290_000],
  ['CASE-S5', 'Case, Skerry 5', '200 × 72 mm', '', '852990', 340_000],
  ['PANEL-V4', 'Front panel, engraved, Voe 40', '130 × 56 mm', '', '852990', 120_000],
  ['PANEL-H3', 'Front panel, engraved, Holm 3', '176 × 66 mm', '', '852990', 150_000],
  ['PANEL-S5', 'Front panel, engraved, Skerry 5', '200 × 72 mm', '', '852990', 170_000],
  ['HEATSINK-TO220', 'Heat sink', '15 K/W', 'TO-220', '761699', 8_200],
  ['PAD-TO220', 'Insulating pad, silicone', '', 'TO-220', '854690', 1_200],
  ['SCREW-M3X6', 'Screw, pan head', 'M3 × 6', '', '731815', 300],
  ['SCREW-M2X5', 'Screw, pan head', 'M2.5 × 5', '', '731815', 300],
  ['SPACER-M3X10', 'Spacer, hexagonal', 'M3 × 10', '', '741539', 1_500],
  ['WASHER-M3', 'Shake-proof washer', 'M3', '', '731821', 150],
  ['FOOT-12', 'Rubber foot, self-adhesive', '12 mm', '', '401699', 1_100],
  ['LABEL-SERIAL', 'Serial number label, polyester', '40 × 20 mm', '', '391990', 900],
];

function slotOf(row: number): string {
  return `${'ABCDEF'.charAt(Math.floor(row / 24) % 6)}-${String((row % 24) + 1).padStart(2, '0')}`;
}

function series(
  values: readonly string[],
  make: (value: string) => Row,
  rest: Pick<DemoPart, 'pack' | 'supplier' | 'originCountry'>,
): Omit<DemoPart, 'bin'>[] {
  return values.map((value) => ({ ...fromRow(make(value)), ...rest }));
}

function fromRow([number, description, value, footprint, hsCode, priceCents100]: Row) {
  const unit = 'piece' as const;
  return { number, description, value, footprint, hsCode, priceCents100, unit, trace: 'batch' as const };
}

/** `4K7` as `4.7 kΩ`, `100P` as `100 pF`. */
function spelt(value: string, base: 'Ω' | 'F' | 'H'): string {
  const match = /^(\d+)([RKMPNU])(\d*)$/.exec(value);
  if (match === null) return value;
  const [, whole = '', letter = '', rest = ''] = match;
  // A millihenry, but a megohm.
  const prefixes: Record<string, string> = {
    R: '',
    K: 'k',
    M: base === 'H' ? 'm' : 'M',
    P: 'p',
    N: 'n',
    U: 'µ',
  };
  return `${whole}${rest === '' ? '' : `.${rest}`} ${prefixes[letter] ?? ''}${base}`;
}

/** Every part of the demo works. */
export const demoParts: readonly DemoPart[] = [
  ...scanned.map((row) => ({
    ...fromRow(row),
    trace: 'each' as const,
    pack: 10,
    supplier: 1 as const,
    originCountry: 'SE',
  })),
  ...loose.map((row) => ({ ...fromRow(row), pack: 50, supplier: 0 as const, originCountry: 'DE' })),
  ...series(
    resistorValues,
    (value) => [`R-${value}-0805`, 'Resistor, thick film, 1 %', spelt(value, 'Ω'), '0805', '853321', 80],
    { pack: 100, supplier: 2, originCountry: 'TW' },
  ),
  ...series(
    ceramicValues,
    (value) => [`C-${value}-0805`, 'Capacitor, ceramic', spelt(value, 'F'), '0805', '853224', 140],
    { pack: 100, supplier: 2, originCountry: 'TW' },
  ),
  ...series(
    silverMicaValues,
    (value) => [
      `C-${value}-C0G-200V`,
      'Capacitor, ceramic C0G, for low-pass filters',
      `${spelt(value, 'F')} 200 V`,
      '1206',
      '853224',
      1_100,
    ],
    { pack: 50, supplier: 2, originCountry: 'TW' },
  ),
  ...series(
    electrolyticValues,
    (value) => [
      `C-${value}-25V-EL`,
      'Capacitor, electrolytic',
      `${spelt(value, 'F')} 25 V`,
      'radial',
      '853222',
      900,
    ],
    { pack: 50, supplier: 2, originCountry: 'TW' },
  ),
  ...series(
    inductorValues,
    (value) => [`L-${value}-1210`, 'Inductor, moulded', spelt(value, 'H'), '1210', '850450', 1_800],
    { pack: 50, supplier: 2, originCountry: 'TW' },
  ),
  {
    ...fromRow(['WIRE-ECU-04', 'Enamelled copper wire for toroids', '0.4 mm', 'reel', '854411', 2]),
    unit: 'mm' as const,
    pack: 50_000,
    supplier: 0 as const,
    originCountry: 'DE',
  },
].map((part, row) => ({ ...part, bin: slotOf(row) }));

/** Enters the parts in the books. */
export async function addParts(tx: Tx, createdAt: Date): Promise<void> {
  await tx.insert(parts).values(
    demoParts.map(({ number, description, value, footprint, unit, trace, hsCode, originCountry }) => ({
      ...{ number, description, value, footprint, unit, trace, hsCode, originCountry, createdAt },
    })),
  );
}
