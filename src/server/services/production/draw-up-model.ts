import { bandLabel } from '~/domain/bench/bands';
import { bandOption, templatePoints } from '~/domain/bench/plan-template';
import { bandGroup, plainPanel, serialPrefixOf, slugOf } from '~/domain/catalog/plain-model';
import type { NewModel } from '~/schemas/bench-alone';
import type { Tx } from '~/server/db/client';
import { models, optionGroups, options, testPlanRevisions, testPoints } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { databaseErrno, write } from '~/server/write';
import type { Ctx } from '~/server/write';
import { releaseTestPlanRevision } from './release-revision';

const duplicate = 1062;
const loadOhm = 50;
/** Addresses that pages of their own stand at. */
const kept = new Set(['new']);

/**
 * Draws up a model in its smallest form, with a first test plan that is released at once: what the bench needs and
 * nothing else. It is a draft, and so never in the shop.
 *
 * @throws DomainError `conflict` where a model of this name is there already, `invalid` where the name has no letter
 */
export async function drawUpModel(
  input: NewModel,
  ctx: Ctx,
): Promise<{ modelId: number; slug: string; name: string; letter: string }> {
  const { name, bands, bandsVary, ratedPower: ratedPowerW } = input;
  const slug = slugOf(name);
  if (slug === '') {
    const sentence =
      'A name has a Latin letter or a figure in it: addresses and serial numbers are made of it.';
    throw new DomainError('invalid', sentence, { name: sentence });
  }
  return write(ctx, async (w) => {
    const [{ insertId: modelId }] = await w.tx
      .insert(models)
      .values({
        ...{ slug, name, ratedPowerW, serialPrefix: await freePrefix(w.tx, name) },
        ...{ tagline: '', description: '', customsDescription: '', hsCode: '', netWeightG: 0 },
        panel: plainPanel(name, bands, bandsVary),
        state: 'draft',
        createdAt: w.now,
      })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        throw nameTaken(name);
      });
    if (kept.has(slug)) throw nameTaken(name);
    if (bandsVary) await offerBands(w.tx, modelId, bands);
    const letter = 'A';
    const [{ insertId: revisionId }] = await w.tx.insert(testPlanRevisions).values({
      ...{ modelId, letter, state: 'draft', note: 'Drawn from the model’s bands and rated power.' },
      ...{ supplyV: input.supplyV, loadOhm, createdAt: w.now },
    });
    const points = templatePoints({
      ...{ bands, bandsVary, ratedPowerW, measure: input.measure },
      ...{ keyDownA: input.keyDown, restA: input.rest, frequencyErrorHz: input.frequencyError },
    });
    await w.tx.insert(testPoints).values(
      points.map(({ lower, upper, ...point }, index) => ({
        ...point,
        ...{ lowerLimit: lower, upperLimit: upper, testPlanRevisionId: revisionId, position: index + 1 },
      })),
    );
    await releaseTestPlanRevision({ model: slug, letter }, w);
    await w.record({
      action: 'model.draw_up',
      subjects: [
        { type: 'model', id: modelId },
        { type: 'test_plan_revision', id: revisionId },
      ],
      details: { name, ratedPowerW, bands, letter, points: points.length },
    });
    return { modelId, slug, name, letter };
  });
}

function nameTaken(name: string): DomainError {
  const sentence = `There is a model at the address of “${name}” already; give this one another name.`;
  return new DomainError('conflict', sentence, { name: sentence });
}

/** The prefix that follows from the name, with a figure where another model has it. */
async function freePrefix(tx: Tx, name: string): Promise<string> {
  const rows = await tx.select({ prefix: models.serialPrefix }).from(models).for('update');
  const taken = new Set(rows.map(({ prefix }) => prefix));
  const wanted = serialPrefixOf(name);
  for (let n = 1; ; n += 1) {
    const prefix = n === 1 ? wanted : `${wanted.slice(0, 8 - `Z${n}`.length)}Z${n}`;
    if (!taken.has(prefix)) return prefix;
  }
}

async function offerBands(tx: Tx, modelId: number, bands: NewModel['bands']): Promise<void> {
  const [{ insertId: optionGroupId }] = await tx.insert(optionGroups).values({
    ...{ modelId, key: bandGroup, label: 'Bands', minChosen: 1, maxChosen: bands.length, position: 1 },
  });
  await tx.insert(options).values(
    bands.map((band, index) => ({
      ...{ optionGroupId, key: bandOption(band), label: bandLabel(band), position: index },
      ...{ priceMinor: 0, isDefault: true, needs: [], excludes: [] },
    })),
  );
}
