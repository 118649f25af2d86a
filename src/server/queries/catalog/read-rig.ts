import { asc, eq, inArray } from 'drizzle-orm';
import { modelIsForSale } from '~/domain/catalog/for-sale';
import type { PanelSpec } from '~/domain/catalog/panel';
import { freePlaces } from '~/domain/orders/checkout';
import { batchTakesOrders } from '~/domain/planning/batch-status';
import type { Day } from '~/lib/dates';
import { parsePanel } from '~/schemas/catalog-panel';
import type { Reader } from '~/server/db/client';
import { batches, models } from '~/server/db/schema';
import { listOptionGroups } from './list-option-groups';
import type { ShopOptionGroup } from './list-option-groups';

/** A batch as the shop shows it. */
export interface ShopBatch {
  number: number;
  places: number;
  placesLeft: number;
  priceMinor: number;
  depositMinor: number | null;
  currency: string;
  /** The owner's estimate; null where there is none, or its day has passed and the owner owes a new one. */
  estimatedOn: string | null;
}

/** A rig as the shop shows it, with the batch that an order would fall into. */
export interface Rig {
  id: number;
  slug: string;
  name: string;
  tagline: string;
  description: string;
  panel: PanelSpec;
  ratedPowerW: number;
  groups: ShopOptionGroup[];
  /** The first that has a free place, or else the first that is open; null where none is. */
  batch: ShopBatch | null;
}

/** A rig that is for sale; null where there is none of this name. */
export async function readRig(reader: Reader, slug: string, today: Day): Promise<Rig | null> {
  const [model] = await reader.select().from(models).where(eq(models.slug, slug));
  if (model === undefined || !modelIsForSale(model.state)) return null;
  const [groups, open] = [
    await listOptionGroups(reader, model.id),
    await listOpenBatches(reader, [model.id]),
  ];
  return {
    id: model.id,
    slug: model.slug,
    name: model.name,
    tagline: model.tagline,
    description: model.description,
    panel: parsePanel(model.panel),
    ratedPowerW: model.ratedPowerW,
    groups,
    batch: nextBatch(open, today),
  };
}

/** The rigs of the shop by name, each with its next batch. */
export async function listRigs(reader: Reader, today: Day): Promise<Rig[]> {
  const rows = (await reader.select().from(models).orderBy(asc(models.name))).filter(({ state }) =>
    modelIsForSale(state),
  );
  const open = await listOpenBatches(
    reader,
    rows.map(({ id }) => id),
  );
  const rigs: Rig[] = [];
  for (const { id, slug, name, tagline, description, panel, ratedPowerW } of rows) {
    rigs.push({
      id,
      slug,
      name,
      tagline,
      description,
      panel: parsePanel(panel),
      ratedPowerW,
      groups: await listOptionGroups(reader, id),
      batch: nextBatch(
        open.filter(({ modelId }) => modelId === id),
        today,
      ),
    });
  }
  return rigs;
}

async function listOpenBatches(reader: Reader, modelIds: number[]) {
  if (modelIds.length === 0) return [];
  const rows = await reader
    .select()
    .from(batches)
    .where(inArray(batches.modelId, modelIds))
    .orderBy(asc(batches.number));
  return rows.filter(({ state }) => batchTakesOrders(state));
}

function nextBatch(open: readonly (typeof batches.$inferSelect)[], today: Day): ShopBatch | null {
  const seen = open.map((batch) => ({
    number: batch.number,
    places: batch.places,
    placesLeft: freePlaces({ places: batch.places, taken: batch.placesTaken, held: batch.placesHeld }),
    priceMinor: batch.priceMinor,
    depositMinor: batch.depositMinor,
    currency: batch.currency,
    estimatedOn: batch.estimatedOn !== null && batch.estimatedOn >= today ? batch.estimatedOn : null,
  }));
  return seen.find(({ placesLeft }) => placesLeft > 0) ?? seen[0] ?? null;
}

/** The rig of a batch that takes orders, with this batch; null where there is none of this number. */
export async function readRigOfBatch(
  reader: Reader,
  number: number,
  today: Day,
): Promise<(Rig & { batch: ShopBatch }) | null> {
  const [row] = await reader
    .select({ batch: batches, slug: models.slug })
    .from(batches)
    .innerJoin(models, eq(models.id, batches.modelId))
    .where(eq(batches.number, number));
  if (row === undefined || !batchTakesOrders(row.batch.state)) return null;
  const rig = await readRig(reader, row.slug, today);
  const batch = nextBatch([row.batch], today);
  return rig === null || batch === null ? null : { ...rig, batch };
}
