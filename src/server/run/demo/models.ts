import { eq } from 'drizzle-orm';
import type { PanelSpec } from '~/domain/catalog/panel';
import { models, optionGroups, options } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';
import { holmPanel, skerryPanel, voePanel } from './panels';

interface DemoOption {
  key: string;
  label: string;
  note?: string;
  priceMinor?: number;
  isDefault?: boolean;
  needs?: string[];
}

interface DemoGroup {
  key: string;
  label: string;
  min: number;
  max: number;
  options: DemoOption[];
}

interface DemoModel {
  slug: string;
  serialPrefix: string;
  name: string;
  tagline: string;
  description: string;
  panel: PanelSpec;
  ratedPowerW: number;
  netWeightG: number;
  customsDescription: string;
  groups: DemoGroup[];
}

function keyer(priceMinor: number): DemoGroup {
  return {
    ...{ key: 'keyer', label: 'Key socket', min: 0, max: 1 },
    options: [{ key: 'keyer.built-in', label: 'Built-in keyer', note: 'adds the Speed knob', priceMinor }],
  };
}

function filter(priceMinor: number): DemoGroup {
  return {
    ...{ key: 'filter', label: 'Receiver', min: 0, max: 1 },
    options: [
      {
        ...{ key: 'filter.narrow', label: 'Narrow filter', priceMinor },
        note: 'four crystals, matched within 30 Hz; adds the Width knob',
      },
    ],
  };
}

/** The rigs that the demo works sells. */
export const demoModels: readonly DemoModel[] = [
  {
    slug: 'voe-40',
    serialPrefix: 'V4',
    name: 'Voe 40',
    tagline: 'a one-band CW transceiver for 40 m',
    description:
      'A small rig for one band, made for a pack and a wire in a tree. It draws little in receive, shows its frequency, and has two knobs to learn. Runs from 10 to 14 V.',
    panel: voePanel,
    ratedPowerW: 2.5,
    netWeightG: 310,
    customsDescription: 'Amateur radio transceiver, 40 m, 2.5 W',
    groups: [keyer(1900)],
  },
  {
    slug: 'holm-3',
    serialPrefix: 'H3',
    name: 'Holm 3',
    tagline: 'a three-band CW transceiver',
    description:
      'Three bands out of four, each with its own low-pass and band-pass filters on relays. The receiver has a crystal ladder filter; the narrow one is matched by hand. Runs from 11 to 14 V.',
    panel: holmPanel,
    ratedPowerW: 3,
    netWeightG: 640,
    customsDescription: 'Amateur radio transceiver, three bands, 3 W',
    groups: [
      {
        ...{ key: 'bands', label: 'Bands', min: 3, max: 3 },
        options: [
          { key: 'band.40m', label: '40 m', isDefault: true },
          { key: 'band.30m', label: '30 m', isDefault: true },
          { key: 'band.20m', label: '20 m', isDefault: true },
          { key: 'band.15m', label: '15 m' },
        ],
      },
      filter(4800),
      keyer(2200),
    ],
  },
  {
    slug: 'skerry-5',
    serialPrefix: 'S5',
    name: 'Skerry 5',
    tagline: 'a five-band CW transceiver with power to set',
    description:
      'Five bands from 40 to 15 m, two output transistors and a power control down to a tenth of a watt. The receiver mixes once, low in noise, and has a place for the narrow filter. Runs from 12 to 14 V.',
    panel: skerryPanel,
    ratedPowerW: 5,
    netWeightG: 890,
    customsDescription: 'Amateur radio transceiver, five bands, 5 W',
    groups: [
      filter(5600),
      {
        ...{ key: 'keyer', label: 'Key socket', min: 0, max: 2 },
        options: [
          { key: 'keyer.built-in', label: 'Built-in keyer', note: 'adds the Speed knob', priceMinor: 2400 },
          {
            ...{
              key: 'keyer.memory',
              label: 'Message memories',
              note: 'four, for the keyer',
              priceMinor: 1400,
            },
            needs: ['keyer.built-in'],
          },
        ],
      },
      {
        ...{ key: 'socket', label: 'Power socket', min: 1, max: 1 },
        options: [
          { key: 'socket.barrel', label: 'Barrel, 2.1 mm', isDefault: true },
          { key: 'socket.locking', label: 'Locking', note: 'with its plug', priceMinor: 900 },
        ],
      },
    ],
  },
];

/** Enters the models with what can be chosen, as drafts. */
export async function addModels(tx: Tx, createdAt: Date): Promise<void> {
  for (const { groups, ...model } of demoModels) {
    const [{ insertId: modelId }] = await tx
      .insert(models)
      .values({ ...model, hsCode: '852560', state: 'draft', createdAt });
    for (const [position, { options: own, min, max, ...group }] of groups.entries()) {
      const [{ insertId: optionGroupId }] = await tx
        .insert(optionGroups)
        .values({ ...group, modelId, minChosen: min, maxChosen: max, position: position + 1 });
      await tx.insert(options).values(
        own.map((option, index) => ({
          optionGroupId,
          note: '',
          priceMinor: 0,
          isDefault: false,
          needs: [],
          ...option,
          excludes: [],
          position: index + 1,
        })),
      );
    }
  }
}

/** Puts the models, whose revisions are released, up for sale. */
export async function sellModels(tx: Tx): Promise<void> {
  await tx.update(models).set({ state: 'for_sale' }).where(eq(models.state, 'draft'));
}
