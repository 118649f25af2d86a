import type { PanelSpec } from '~/domain/catalog/panel';
import type { Db } from '~/server/db/client';
import {
  batches,
  bomRevisions,
  buildSheetRevisions,
  models,
  optionGroups,
  options,
  testPlanRevisions,
  works,
} from '~/server/db/schema';

export const at = new Date('2027-03-01T09:00:00.000Z');

export async function seedWorks(db: Db): Promise<void> {
  await db.insert(works).values({
    name: 'Thistledown Radio Works',
    addressLines: ['1 Thistle Lane', 'Nowhere'],
    country: 'DE',
    email: 'works@thistledown.example',
    timeZone: 'Europe/Berlin',
    currency: 'EUR',
  });
}

export function buildPanel(name: string): PanelSpec {
  const bands = ['40', '30', '20', '15'];
  return {
    name,
    widthMm: 160,
    heightMm: 60,
    nameAt: { x: 9, y: 10 },
    display: { x: 60, y: 8, widthMm: 40, heightMm: 13, text: '14.060.0' },
    knobs: [
      { key: 'tuning', label: '', kind: 'tuning', x: 80, y: 40, r: 14 },
      { key: 'width', label: 'Width', kind: 'pointer', x: 124, y: 20, r: 4.5 },
    ],
    sockets: [{ key: 'key', label: 'Key', x: 142, y: 39, r: 2.7 }],
    lamps: bands.map((label, index) => ({ key: `band.${label}m`, label, x: 13, y: 18 + index * 6 })),
    callOuts: [
      { key: 'bands', to: 'band.40m', side: 'left', at: 'top' },
      { key: 'receiver', to: 'width', side: 'right', at: 'top' },
    ],
  };
}

export interface SeededModel {
  modelId: number;
  slug: string;
  bomRevisionId: number;
  buildSheetRevisionId: number;
  testPlanRevisionId: number;
}

/** A model with three bands out of four and a narrow filter, its revisions released. */
export async function seedModel(
  db: Db,
  changes: { slug?: string; name?: string; serialPrefix?: string } = {},
): Promise<SeededModel> {
  const { slug = 'holm-3', name = 'Holm 3', serialPrefix = 'H3' } = changes;
  const [{ insertId: modelId }] = await db.insert(models).values({
    slug,
    serialPrefix,
    name,
    tagline: 'a three-band CW transceiver.',
    description: 'Three bands out of four, chosen on the panel.',
    panel: buildPanel(name),
    ratedPowerW: 3,
    netWeightG: 420,
    customsDescription: 'Amateur radio transceiver, assembled',
    hsCode: '8525.60',
    state: 'for_sale',
    createdAt: at,
  });
  const [{ insertId: bandsId }] = await db
    .insert(optionGroups)
    .values({ modelId, key: 'bands', label: 'Bands', minChosen: 3, maxChosen: 3, position: 1 });
  const [{ insertId: receiverId }] = await db
    .insert(optionGroups)
    .values({ modelId, key: 'receiver', label: 'Receiver', minChosen: 0, maxChosen: 1, position: 2 });
  await db.insert(options).values([
    ...['40', '30', '20', '15'].map((band, index) => ({
      optionGroupId: bandsId,
      key: `band.${band}m`,
      label: `${band} m`,
      priceMinor: 0,
      position: index,
      isDefault: index < 3,
      needs: [],
      excludes: [],
    })),
    {
      optionGroupId: receiverId,
      key: 'filter.narrow',
      label: 'Narrow filter',
      note: 'four crystals, matched within 30 Hz',
      priceMinor: 4800,
      position: 0,
      needs: [],
      excludes: [],
    },
  ]);
  const released = { modelId, letter: 'A', state: 'released' as const, createdAt: at, releasedAt: at };
  const [{ insertId: bomRevisionId }] = await db.insert(bomRevisions).values(released);
  const [{ insertId: buildSheetRevisionId }] = await db.insert(buildSheetRevisions).values(released);
  const [{ insertId: testPlanRevisionId }] = await db
    .insert(testPlanRevisions)
    .values({ ...released, supplyV: 13.8, loadOhm: 50 });
  return { modelId, slug, bomRevisionId, buildSheetRevisionId, testPlanRevisionId };
}

/** An open batch of a model, € 389 a place with a deposit of € 100. */
export async function seedBatch(
  db: Db,
  model: SeededModel,
  changes: Partial<typeof batches.$inferInsert> = {},
): Promise<{ batchId: number; number: number }> {
  const { modelId, bomRevisionId, buildSheetRevisionId, testPlanRevisionId } = model;
  const number = changes.number ?? 13;
  const [{ insertId: batchId }] = await db.insert(batches).values({
    number,
    modelId,
    bomRevisionId,
    buildSheetRevisionId,
    testPlanRevisionId,
    state: 'open',
    places: 20,
    priceMinor: 38_900,
    depositMinor: 10_000,
    currency: 'EUR',
    estimatedOn: '2027-03-23',
    createdAt: at,
    ...changes,
  });
  return { batchId, number };
}
