import { eq } from 'drizzle-orm';
import type { StepEntry } from '~/domain/production/steps';
import type { BuildStage } from '~/domain/production/stages';
import { buildSheetRevisions, buildSteps, models } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';

/** A build step, with what the works usually writes down at it. */
export interface DemoStep {
  stage: BuildStage;
  title: string;
  instruction: string;
  caution?: string;
  minutes: number;
  skill: string;
  condition?: string;
  entry?: StepEntry;
  /** Around what the entries lie, and how far they spread. */
  usual?: { mean: number; spread: number };
}

const supply =
  'Set the supply’s current limit to 0.3 A before the first switching on. Work on a supply that is isolated from the mains.';
const rf = 'RF burns: key only into a dummy load rated for the power, and keep fingers off the output stage.';
const hot = 'The output transistor and its heat sink are hot after key-down.';

function number(label: string, unit: string, lower: number, upper: number, spread: number) {
  return { entry: { label, unit, lower, upper }, usual: { mean: (lower + upper) / 2, spread } };
}

interface Figures {
  restMa: readonly [number, number];
  hasBandBoard: boolean;
  bands: readonly { name: string; condition?: string }[];
  hasFilterChoice: boolean;
}

const figures: Readonly<Record<string, Figures>> = {
  'voe-40': {
    restMa: [24, 40],
    hasBandBoard: false,
    bands: [{ name: '40 m' }],
    hasFilterChoice: false,
  },
  'holm-3': {
    restMa: [48, 72],
    hasBandBoard: true,
    bands: ['40', '30', '20', '15'].map((band) => ({ name: `${band} m`, condition: `band.${band}m` })),
    hasFilterChoice: true,
  },
  'skerry-5': {
    restMa: [70, 105],
    hasBandBoard: true,
    bands: ['40', '30', '20', '17', '15'].map((band) => ({ name: `${band} m` })),
    hasFilterChoice: true,
  },
};

/** The build steps of a model of the demo works, in order. */
export function demoSteps(slug: string): DemoStep[] {
  const of = figures[slug];
  if (of === undefined) throw new Error(`There is no model ${slug} in the demo.`);
  return [
    {
      ...{ stage: 'kit', title: 'Kit the unit', minutes: 25, skill: 'kit' },
      instruction:
        'Scan the lots of the boards, crystals and transistors; take the tray of the batch for the rest.',
    },
    {
      ...{ stage: 'boards', title: 'Inspect the main board', minutes: 10, skill: 'inspect' },
      instruction:
        'Look for bridges at the fine-pitched parts and for the marks of the diodes and electrolytics.',
    },
    {
      ...{
        stage: 'boards',
        title: 'Wind the toroids',
        minutes: of.bands.length > 1 ? 55 : 20,
        skill: 'wind',
      },
      instruction:
        'Wind to the table on the back of this sheet. Count the turns on the inside of the core, twice.',
    },
    ...(of.hasBandBoard
      ? [
          {
            ...{ stage: 'boards' as const, title: 'Fill the band board', minutes: 40, skill: 'solder' },
            instruction: 'Fit the filters of the bands ordered; the places of the others stay empty.',
          },
        ]
      : []),
    {
      ...{ stage: 'boards', title: 'Fit crystals, connectors and controls', minutes: 30, skill: 'solder' },
      instruction: 'Crystals stand 0.5 mm off the board. Controls are soldered when the panel is on.',
    },
    {
      ...{
        stage: 'boards',
        title: 'Fit the narrow filter',
        minutes: 12,
        skill: 'solder',
        condition: 'filter.narrow',
      },
      instruction: 'Take the matched set of four. Note the spread from its bag.',
      ...number('Spread of the set', 'Hz', 0, 30, 6),
    },
    {
      ...{ stage: 'boards', title: 'Supply voltages', minutes: 8, skill: 'measure', caution: supply },
      instruction: 'Switch on without the output transistor’s drive. Measure at TP1.',
      ...number('5 V rail', 'V', 4.9, 5.1, 0.02),
    },
    {
      ...{ stage: 'boards', title: 'Rest current', minutes: 5, skill: 'measure', caution: supply },
      instruction: 'Receiver on, no signal, volume down.',
      ...number('Current at rest', 'mA', of.restMa[0], of.restMa[1], (of.restMa[1] - of.restMa[0]) / 12),
    },
    {
      ...{
        stage: 'boards',
        title: 'Fit output transistor and heat sink',
        minutes: 15,
        skill: 'solder',
        caution: hot,
      },
      instruction: 'Pad without wrinkles, screw with its washer. No connection from tab to case.',
    },
    {
      ...{ stage: 'align', title: 'Calibrate the reference', minutes: 10, skill: 'align' },
      instruction: 'After ten minutes of warming up, set the reference against the counter.',
      ...number('Correction', 'Hz', -60, 60, 14),
    },
    ...of.bands.map(({ name, condition }) => ({
      ...{ stage: 'align' as const, title: `Peak the band-pass, ${name}`, minutes: 8, skill: 'align' },
      ...(condition === undefined ? {} : { condition }),
      instruction: 'Peak both trimmers on noise, then on a weak signal in the middle of the band.',
    })),
    {
      ...{ stage: 'align', title: 'Bias of the driver', minutes: 8, skill: 'align', caution: rf },
      instruction: 'Dummy load on. Set RV3 with the key down and the drive off.',
      ...number('Emitter of Q8', 'V', 0.9, 1.3, 0.05),
    },
    {
      ...{ stage: 'align', title: 'Sidetone and offset', minutes: 6, skill: 'align' },
      instruction: 'Zero beat with the counter’s signal; the offset is 700 Hz.',
      ...number('Offset', 'Hz', 690, 710, 2.5),
    },
    {
      ...{
        stage: 'align',
        title: 'Set up the keyer',
        minutes: 5,
        skill: 'align',
        condition: 'keyer.built-in',
      },
      instruction: 'Program the keyer, check both paddles and the whole range of the Speed knob.',
    },
    {
      ...{
        stage: 'align',
        title: 'Soak for twelve hours',
        minutes: 10,
        skill: 'align',
        caution: `${hot} ${rf}`,
      },
      instruction: 'At 13.8 V into the dummy load, one minute key down in each ten. Note anything odd.',
      entry: { label: 'Remark', unit: null, lower: null, upper: null },
    },
  ];
}

/** Drafts a model's first build sheet. */
export async function draftBuildSheet(tx: Tx, slug: string, createdAt: Date): Promise<void> {
  const [model] = await tx.select({ id: models.id }).from(models).where(eq(models.slug, slug));
  if (model === undefined) throw new Error(`There is no model ${slug}.`);
  const [{ insertId: buildSheetRevisionId }] = await tx
    .insert(buildSheetRevisions)
    .values({ modelId: model.id, letter: 'A', state: 'draft', note: 'First issue.', createdAt });
  await tx.insert(buildSteps).values(
    demoSteps(slug)
      .filter(({ condition }) => condition !== 'filter.narrow' || figures[slug]?.hasFilterChoice)
      .map(({ usual: _, ...step }, index) => ({
        caution: '',
        condition: null,
        entry: null,
        ...step,
        buildSheetRevisionId,
        position: index + 1,
      })),
  );
}
