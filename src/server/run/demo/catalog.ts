import { reviseFrequencyPlan } from '~/server/services/bench/revise-frequency-plan';
import { createBomRevision } from '~/server/services/production/create-bom-revision';
import {
  releaseBomRevision,
  releaseBuildSheetRevision,
  releaseTestPlanRevision,
} from '~/server/services/production/release-revision';
import type { WriteContext } from '~/server/write';
import { demoBoms } from './boms';
import { demoFrequencyPlans } from './frequency-plans';
import { addModels, demoModels, sellModels } from './models';
import { addParts } from './parts';
import { draftTestPlan } from './plans';
import { draftBuildSheet } from './sheets';

/** Enters parts and models, and releases the first revisions of each model. */
export async function addCatalog(w: WriteContext): Promise<void> {
  await addParts(w.tx, w.now);
  await addModels(w.tx, w.now);
  for (const { slug: model } of demoModels) {
    await issueBom(w, model, 0);
    await draftBuildSheet(w.tx, model, w.now);
    await draftTestPlan(w.tx, model, w.now);
    await releaseBuildSheetRevision({ model, letter: 'A' }, w);
    await releaseTestPlanRevision({ model, letter: 'A' }, w);
    const plan = demoFrequencyPlans[model];
    if (plan !== undefined) await reviseFrequencyPlan({ model, plan }, w);
  }
  await sellModels(w.tx);
}

/** Drafts and releases a revision of a model's bill of materials; 0 is the first. */
export async function issueBom(w: WriteContext, model: string, revision: number): Promise<void> {
  const bom = demoBoms[model]?.[revision];
  if (bom === undefined) throw new Error(`The demo has no revision ${revision} of ${model}.`);
  const { letter } = await createBomRevision({ model, ...bom }, w);
  await releaseBomRevision({ model, letter }, w);
}
