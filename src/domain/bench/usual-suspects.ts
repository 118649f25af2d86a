/** Which way a reading is out: over its upper limit, or under its lower one (a check that was answered with no). */
export type Direction = 'over' | 'under';

/** A likely cause that the trade knows of. */
export interface Suspect {
  cause: string;
  /** How one looks for it, or what is done about it. */
  look: string;
  /** Against the other suspects of the same symptom; a judgement, not a statistic. */
  weight: number;
}

interface Row extends Suspect {
  quantities: readonly string[];
  directions: readonly Direction[];
}

/** What the table rests on, as a screen says it. */
export const SUSPECTS_SOURCE = 'common practice';

const HARMONICS = Array.from({ length: 9 }, (_, index) => `harmonic_${String(index + 2)}`);
const POWERS = ['rf_power', 'efficiency', 'power_after_minute'];
const HEAT = [
  'dissipation',
  'dissipation_per_device',
  'junction_temperature',
  'case_temperature',
  'power_drop',
];

/**
 * The usual suspects by symptom. All of it is *common practice* in the trade of small transmitters, and so are the
 * weights; the values of parts are those of outputs of a few watts. A works' own history outweighs it.
 */
const ROWS: readonly Row[] = [
  ...rows(
    HARMONICS,
    ['over'],
    [
      ['Low-pass coil has a wrong number of turns', 'Count the turns of each coil of the band’s filter.', 3],
      [
        'Low-pass capacitor of a wrong value',
        'Read each capacitor of the band’s filter against its drawing.',
        2,
      ],
      [
        'Output stage is overdriven',
        'Turn the drive down a little: a harmonic falls faster than the carrier.',
        2,
      ],
      ['Open joint in the low-pass filter', 'Touch up the joints of coils and their ground ends.', 2],
      [
        'Output stage oscillates',
        '10 to 100 Ω from base to ground, or a bead on the base, calms it; it can show as an SWR that is worse than a clean carrier’s.',
        1,
      ],
    ],
  ),
  ...rows(
    ['spurious'],
    ['over'],
    [
      [
        'Mixer is out of balance: an oscillator leaks',
        'Look at the product’s frequency, then set the balance again.',
        3,
      ],
      ['Band-pass filter is out of alignment', 'Peak it again on the band’s middle.', 2],
      [
        'Output stage oscillates',
        'Tune around with the key down and a receiver near: jumps or extra signals show it. 10 to 100 Ω from base to ground, or a bead on the base, calms it.',
        2,
      ],
      [
        'Supply or clock gets into the signal',
        'Look whether products stand at even spacing from the carrier.',
        1,
      ],
    ],
  ),
  ...rows(
    POWERS,
    ['under'],
    [
      [
        'Output transistor is weak or damaged',
        'Compare its currents at rest and key down with a good rig’s.',
        3,
      ],
      ['Low-pass coil has a wrong number of turns', 'Count the turns of each coil of the band’s filter.', 2],
      ['Too little drive from the stage before', 'Follow the level from stage to stage.', 2],
      ['Output transformer has a wrong number of turns', 'Count them against the drawing.', 2],
      ['Supply sags under load', 'Read the voltage at the unit with the key down.', 1],
    ],
  ),
  ...rows(
    ['rf_power'],
    ['over'],
    [
      ['Drive is set too high', 'Set the drive again.', 3],
      ['Supply is set too high', 'Read the voltage at the unit with the key down.', 2],
      ['Output transformer has a wrong number of turns', 'Count them against the drawing.', 1],
    ],
  ),
  ...rows(
    ['current_rest', 'current_no_drive'],
    ['over'],
    [
      ['Bias is set too high', 'Set the bias again, cold and after a minute.', 3],
      ['Solder bridge', 'Look along the supply lines with a lens.', 2],
      [
        'A part is fitted the wrong way round or leaks',
        'Feel for warm parts with the supply current limited.',
        2,
      ],
    ],
  ),
  ...rows(
    ['current_rest', 'current_no_drive'],
    ['under'],
    [
      ['A stage has no supply: open joint', 'Follow the supply voltage from stage to stage.', 3],
      ['Bias is set too low', 'Set the bias again, cold and after a minute.', 2],
    ],
  ),
  ...rows(
    ['current_key_down'],
    ['over'],
    [
      ['Output transformer has a wrong number of turns', 'Count them against the drawing.', 3],
      ['Bias is set too high', 'Set the bias again, cold and after a minute.', 2],
      ['Low-pass coil has a wrong number of turns', 'Count the turns of each coil of the band’s filter.', 2],
      [
        'Paralleled output transistors do not share the current',
        'Emitter resistors near 1 Ω let them share it.',
        1,
      ],
      ['Output stage oscillates', '10 to 100 Ω from base to ground, or a bead on the base, calms it.', 1],
    ],
  ),
  ...rows(
    ['current_key_down'],
    ['under'],
    [
      ['Too little drive from the stage before', 'Follow the level from stage to stage.', 2],
      [
        'Output transistor is weak or damaged',
        'Compare its currents at rest and key down with a good rig’s.',
        2,
      ],
    ],
  ),
  ...rows(
    HEAT,
    ['over'],
    [
      [
        'Output transistor does not lie flat on its heat sink',
        'Look at the washer, the screw and the compound.',
        3,
      ],
      ['Bias is set too high', 'Set the bias again, cold and after a minute.', 2],
      [
        'Paralleled output transistors do not share the current',
        'Emitter resistors near 1 Ω let them share it.',
        2,
      ],
      [
        'Output transistor has no heat sink and carries too much',
        'A small plastic one carries about 1.5 W at CW duty; at 2 W each, or key-down modes, fit a sink.',
        1,
      ],
    ],
  ),
  ...rows(
    ['frequency_error'],
    ['over', 'under'],
    [
      ['Reference is not set', 'Set it again once it has warmed up.', 3],
      ['Reference was set before it was warm', 'Give it its time, then set it again.', 2],
      ['Crystal or its load capacitor of a wrong value', 'Read them against the drawing.', 1],
    ],
  ),
  ...rows(
    ['receive_offset'],
    ['over', 'under'],
    [
      ['Offset is not set', 'Set it again by ear and by counter.', 3],
      ['Crystal or its load capacitor of a wrong value', 'Read them against the drawing.', 1],
    ],
  ),
  ...rows(
    ['sensitivity'],
    ['over'],
    [
      ['Front-end filter is out of alignment', 'Peak it again on the band’s middle.', 3],
      ['Open joint in the receive path', 'Follow a signal from the antenna inwards.', 2],
      ['Antenna switch does not come through', 'Read the loss from antenna to first stage.', 2],
    ],
  ),
  ...rows(
    ['keying_rise', 'keying_fall'],
    ['over', 'under'],
    [
      ['Keying capacitor or resistor of a wrong value', 'Read them against the drawing.', 3],
      ['Keying transistor is weak or damaged', 'Look at its levels, key up and key down.', 1],
    ],
  ),
  ...rows(
    ['supply_voltage'],
    ['over', 'under'],
    [
      ['Supply is set wrongly', 'Read the voltage at the unit with the key down.', 2],
      ['Lead or connector has too much resistance', 'Read the voltage at both ends of the lead.', 1],
    ],
  ),
];

function rows(
  quantities: readonly string[],
  directions: readonly Direction[],
  suspects: readonly [cause: string, look: string, weight: number][],
): Row[] {
  return suspects.map(([cause, look, weight]) => ({ quantities, directions, cause, look, weight }));
}

/** The usual suspects of a symptom, the likeliest first; none for a quantity that the table does not know. */
export function usualSuspects(quantityKey: string, direction: Direction): Suspect[] {
  return ROWS.filter(
    ({ quantities, directions }) => quantities.includes(quantityKey) && directions.includes(direction),
  )
    .map(({ cause, look, weight }) => ({ cause, look, weight }))
    .sort((a, b) => b.weight - a.weight);
}

/** Which way a point that failed is out of its limits. */
export function directionOf({ value, upper }: { value: number | null; upper: number | null }): Direction {
  return value !== null && upper !== null && value > upper ? 'over' : 'under';
}
