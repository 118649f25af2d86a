import type { DraftLine } from '~/server/services/production/create-bom-revision';

/** A part with its places (`R1-R4 R9`) or, for what has no place, a count; and the options that call for it. */
type Row = readonly [part: string, places: string | number, condition?: string];

const core: readonly Row[] = [
  ['R-10R-0805', 'R1 R2'],
  ['R-47R-0805', 'R3'],
  ['R-51R-0805', 'R4'],
  ['R-100R-0805', 'R5-R8'],
  ['R-220R-0805', 'R9 R10'],
  ['R-470R-0805', 'R11 R12'],
  ['R-1K-0805', 'R13-R17'],
  ['R-2K2-0805', 'R18 R19'],
  ['R-4K7-0805', 'R20-R25'],
  ['R-10K-0805', 'R26-R37'],
  ['R-22K-0805', 'R38 R39'],
  ['R-47K-0805', 'R40-R42'],
  ['R-100K-0805', 'R43-R47'],
  ['R-1M-0805', 'R48'],
  ['C-22P-0805', 'C1 C2'],
  ['C-100P-0805', 'C3-C5'],
  ['C-220P-0805', 'C6 C7'],
  ['C-1N-0805', 'C8-C10'],
  ['C-10N-0805', 'C11-C20'],
  ['C-100N-0805', 'C21-C48'],
  ['C-1U-0805', 'C49-C52'],
  ['C-10U-25V-EL', 'C53-C55'],
  ['C-100U-25V-EL', 'C56 C57'],
  ['C-470U-25V-EL', 'C58'],
  ['L-10U-1210', 'L1 L2'],
  ['L-100U-1210', 'L3'],
  ['TOR-37-43', 'T1'],
  ['TOR-50-43', 'T2'],
  ['BEAD-1206-600R', 'FB1-FB3'],
  ['TRN-NPN-SS-SOT23', 'Q1-Q3'],
  ['FET-N-SW-SOT23', 'Q4 Q5'],
  ['FET-J-N-SOT23', 'Q6'],
  ['FET-P-PWR-SO8', 'Q7'],
  ['TRN-NPN-RF-TO126', 'Q8'],
  ['DIO-SW-SOD123', 'D1-D4'],
  ['DIO-SCH-SMA', 'D5'],
  ['DIO-ZEN-33V', 'D6'],
  ['IC-OPAMP-DUAL-SO8', 'U1'],
  ['IC-SWITCH-SO16', 'U2'],
  ['IC-AFAMP-SO8', 'U3'],
  ['IC-REG-5V-TO252', 'U4'],
  ['IC-REG-3V3-SOT223', 'U5'],
  ['IC-CLKGEN-MSOP10', 'U6'],
  ['IC-MCU-32-TQFP32', 'U7'],
  ['IC-LOGIC-HEX-SO14', 'U8'],
  ['XTAL-25M-TCXO', 'X1'],
  ['XTAL-4M9152-HC49U', 'X2-X5'],
  ['CON-BNC-PCB', 'J1'],
  ['CON-JACK-35', 'J2 J3'],
  ['CON-FFC-16', 'J5'],
  ['FUSE-PTC-1A5', 'F1'],
  ['POT-10K-LOG', 'RV1'],
  ['POT-TRIM-1K', 'RV3'],
  ['ENC-ROT-24', 'SW1'],
  ['SCREW-M3X6', 12],
  ['SPACER-M3X10', 4],
  ['WASHER-M3', 12],
  ['FOOT-12', 4],
  ['LABEL-SERIAL', 1],
];

/** What a model has besides the core, its bands and its choices. */
const own = {
  voe: [
    ['PCB-V4-MAIN', 'A1'],
    ['FET-N-RF-TO220', 'Q9'],
    ['HEATSINK-TO220', 1],
    ['PAD-TO220', 1],
    ['DISP-OLED-128X32', 'DS1'],
    ['CON-DC-BARREL', 'J4'],
    ['KNOB-15', 1],
    ['KNOB-TUNING-30', 1],
    ['CASE-V4', 1],
    ['PANEL-V4', 1],
  ],
  holm: [
    ['PCB-H3-MAIN', 'A1'],
    ['PCB-H3-BANDS', 'A2'],
    ['FET-N-RF-TO220', 'Q9'],
    ['HEATSINK-TO220', 1],
    ['PAD-TO220', 1],
    ['DISP-OLED-128X32', 'DS1'],
    ['CON-DC-BARREL', 'J4'],
    ['CON-HDR-2X10', 'J6 J7'],
    ['IC-OPAMP-LN-SO8', 'U9'],
    ['IC-REG-8V-SOT89', 'U10'],
    ['POT-10K-LIN', 'RV4'],
    ['KNOB-15', 2],
    ['KNOB-TUNING-30', 1],
    ['SCREW-M2X5', 6],
    ['CASE-H3', 1],
    ['PANEL-H3', 1],
  ],
  skerry: [
    ['PCB-S5-MAIN', 'A1'],
    ['PCB-S5-BANDS', 'A2'],
    ['FET-N-RF-TO220', 'Q9 Q10'],
    ['HEATSINK-TO220', 2],
    ['PAD-TO220', 2],
    ['DISP-OLED-128X64', 'DS1'],
    ['CON-DC-BARREL', 'J4', 'socket.barrel'],
    ['CON-DC-LOCK', 'J4', 'socket.locking'],
    ['CON-HDR-2X10', 'J6-J8'],
    ['IC-OPAMP-LN-SO8', 'U9'],
    ['IC-REG-8V-SOT89', 'U10'],
    ['IC-MIXER-SO8', 'U11'],
    ['DIO-PIN-SOT23', 'D7 D8'],
    ['TRN-PNP-SS-SOT23', 'Q11 Q12'],
    ['L-47U-1210', 'L4 L5'],
    ['R-330R-0805', 'R49-R52'],
    ['C-47U-25V-EL', 'C59'],
    ['POT-10K-LIN', 'RV4 RV5'],
    ['KNOB-15', 3],
    ['KNOB-TUNING-40', 1],
    ['SCREW-M2X5', 8],
    ['CASE-S5', 1],
    ['PANEL-S5', 1],
  ],
} satisfies Record<string, readonly Row[]>;

const keyer: readonly Row[] = [
  ['IC-MCU-8-SO14', 'U20', 'keyer.built-in'],
  ['POT-10K-LIN', 'RV2', 'keyer.built-in'],
  ['R-10K-0805', 'R60 R61', 'keyer.built-in'],
  ['C-1N-0805', 'C60 C61', 'keyer.built-in'],
  ['C-100N-0805', 'C62', 'keyer.built-in'],
  ['KNOB-15', 1, 'keyer.built-in'],
];

const memories: readonly Row[] = [
  ['IC-EEPROM-SO8', 'U21', 'keyer.memory'],
  ['SWITCH-TACT-6', 'SW2-SW5', 'keyer.memory'],
];

/** The ladder's own capacitors and terminations decide its width. */
const filter: readonly Row[] = [
  ['C-220P-0805', 'C70-C74', 'filter.narrow'],
  ['C-68P-0805', 'C70-C74', 'not filter.narrow'],
  ['R-150R-0805', 'R70 R71', 'filter.narrow'],
  ['R-680R-0805', 'R70 R71', 'not filter.narrow'],
  ['POT-10K-LIN', 'RV6', 'filter.narrow'],
  ['KNOB-15', 1, 'filter.narrow'],
];

/** Low-pass and band-pass of a band; `at` begins its hundred of places. */
const bandValues = {
  '40m': {
    at: 1,
    outer: '470P',
    inner: '1N',
    core: 'TOR-37-2',
    tuned: '150P',
    coupling: '33P',
    wireMm: 2300,
  },
  '30m': {
    at: 2,
    outer: '330P',
    inner: '680P',
    core: 'TOR-37-2',
    tuned: '100P',
    coupling: '33P',
    wireMm: 2000,
  },
  '20m': {
    at: 3,
    outer: '220P',
    inner: '470P',
    core: 'TOR-37-6',
    tuned: '68P',
    coupling: '22P',
    wireMm: 1900,
  },
  '17m': {
    at: 4,
    outer: '180P',
    inner: '390P',
    core: 'TOR-37-6',
    tuned: '47P',
    coupling: '22P',
    wireMm: 1700,
  },
  '15m': {
    at: 5,
    outer: '150P',
    inner: '330P',
    core: 'TOR-37-6',
    tuned: '33P',
    coupling: '22P',
    wireMm: 1600,
  },
} as const;

type DemoBand = keyof typeof bandValues;

function bandRows(band: DemoBand, isSwitched: boolean, condition?: string): Row[] {
  const { at, outer, inner, core: toroid, tuned, coupling, wireMm } = bandValues[band];
  const rows: Row[] = [
    [`C-${outer}-C0G-200V`, `C${at}01 C${at}04`],
    [`C-${inner}-C0G-200V`, `C${at}02 C${at}03`],
    [toroid, `L${at}01-L${at}03`],
    [`C-${tuned}-0805`, `C${at}11 C${at}13`],
    [`C-${coupling}-0805`, `C${at}12`],
    ['TRIM-5-50P', `CV${at}01 CV${at}02`],
    ['TOR-37-6', `T${at}01 T${at}02`],
    ['LED-3MM-AMBER', `D${at}03`],
    ['R-3K3-0805', `R${at}01`],
    ['WIRE-ECU-04', wireMm],
    ...(isSwitched
      ? ([
          ['REL-DPDT-5V', `K${at}01 K${at}02`],
          ['DIO-SW-SOD123', `D${at}01 D${at}02`],
        ] as const)
      : []),
  ];
  return rows.map(([part, places]): Row =>
    condition === undefined ? [part, places] : [part, places, condition],
  );
}

const choosable = ['40m', '30m', '20m', '15m'] as const;
const all = ['40m', '30m', '20m', '17m', '15m'] as const;

const holmRows: readonly Row[] = [
  ...own.holm,
  ...core,
  ...choosable.flatMap((band) => bandRows(band, true, `band.${band}`)),
  ...filter,
  ...keyer,
];

/** The bills of materials by model, oldest revision first, each with what it changed. */
export const demoBoms: Readonly<Record<string, readonly { note: string; lines: DraftLine[] }[]>> = {
  'voe-40': [
    { note: 'First issue.', lines: draft([...own.voe, ...core, ...bandRows('40m', false), ...keyer]) },
  ],
  'holm-3': [
    { note: 'First issue.', lines: draft(holmRows) },
    {
      note: 'C302 and C303 from 470 pF to 390 pF: more in hand at the second harmonic on 20 m.',
      lines: draft(
        holmRows.map((row): Row =>
          row[1] === 'C302 C303' ? ['C-390P-C0G-200V', 'C302 C303', 'band.20m'] : row,
        ),
      ),
    },
  ],
  'skerry-5': [
    {
      note: 'First issue.',
      lines: draft([
        ...own.skerry,
        ...core,
        ...all.flatMap((band) => bandRows(band, true)),
        ...filter,
        ...keyer,
        ...memories,
      ]),
    },
  ],
};

/** Rows of the same part under the same condition become one line. */
function draft(rows: readonly Row[]): DraftLine[] {
  const lines = new Map<string, DraftLine>();
  for (const [partNumber, places, condition] of rows) {
    const designators = typeof places === 'string' ? expand(places) : [];
    const quantity = typeof places === 'number' ? places : designators.length;
    const known = lines.get(`${partNumber} ${condition ?? ''}`);
    lines.set(`${partNumber} ${condition ?? ''}`, {
      partNumber,
      quantity: (known?.quantity ?? 0) + quantity,
      designators: [...(known?.designators ?? []), ...designators],
      condition: condition ?? null,
      scrapPercent: /^[RC]-.*-0805$/.test(partNumber) ? 5 : /^(SCREW|WASHER|WIRE)/.test(partNumber) ? 3 : 0,
    });
  }
  return [...lines.values()];
}

/** `R1-R3 R9` as R1, R2, R3, R9. */
function expand(places: string): string[] {
  return places.split(' ').flatMap((place) => {
    const range = /^([A-Z]+)(\d+)-[A-Z]+(\d+)$/.exec(place);
    if (range === null) return [place];
    const [, letters = '', from, to] = range;
    return Array.from(
      { length: Number(to) - Number(from) + 1 },
      (_, step) => `${letters}${Number(from) + step}`,
    );
  });
}
