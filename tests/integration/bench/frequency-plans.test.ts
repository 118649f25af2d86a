import { beforeEach, describe, expect, test } from 'vitest';
import type { FrequencyPlan } from '~/domain/bench/frequency-plan';
import { POST as plansDoor } from '~/pages/api/models/[slug]/frequency-plans';
import { letIn } from '~/server/auth/sessions';
import type { SignedIn } from '~/server/auth/sessions';
import { frequencyPlanRevisions, ledgerEntries } from '~/server/db/schema';
import { findFrequencyPlan, getFrequencyPlan } from '~/server/queries/bench/get-frequency-plan';
import { reviseFrequencyPlan } from '~/server/services/bench/revise-frequency-plan';
import { planToColumns } from '~/schemas/frequency-plans';
import { seedModel, seedWorks } from '../../factories/catalog';
import type { SeededModel } from '../../factories/catalog';
import { callAs } from '../../factories/bench';
import { seedPerson } from '../../factories/people';
import { browser, callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let model: SeededModel;
let owner: SignedIn;

const plan: FrequencyPlan = {
  oscillators: [
    { symbol: 'VFO', name: 'VFO', ranges: [{ band: null, lowHz: 4.996e6, highHz: 5.096e6 }] },
    { symbol: 'XO', name: 'Crystal oscillator', ranges: [{ band: null, lowHz: 12.096e6, highHz: 12.096e6 }] },
  ],
  stages: [],
  carriers: [{ band: '40m', expression: 'XO − VFO' }],
  spacings: [],
};

beforeEach(async () => {
  await seedWorks(database.db);
  model = await seedModel(database.db);
  const found = await letIn(await seedPerson(database.db, { roles: ['owner'] }));
  if (found === null) throw new Error('The owner is shut out.');
  owner = found;
});

function formOf(columns: Record<string, readonly string[]>): URLSearchParams {
  const form = new URLSearchParams({ seen: '0' });
  for (const [name, values] of Object.entries(columns)) for (const value of values) form.append(name, value);
  return form;
}

const post = (body: URLSearchParams) =>
  callDoor(plansDoor, { body, headers: browser, params: { slug: model.slug }, person: owner });

describe('a frequency plan', () => {
  test('is kept as a revision by its plain form, and is in use', async () => {
    const { response } = await post(formOf(planToColumns(plan)));
    expect(response.status).toBe(303);
    expect(response.headers.get('location')).toBe(`/works/models/${model.slug}/frequency-plan`);
    expect(await findFrequencyPlan(database.db, model.modelId)).toEqual(plan);
    const [entry] = await database.db.select().from(ledgerEntries);
    expect(entry).toMatchObject({ action: 'frequency_plan.revise' });
  });

  test('replaces the one before, which stays to be looked at', async () => {
    const ctx = callAs(database.db, owner.id);
    await reviseFrequencyPlan({ model: model.slug, plan }, ctx);
    const next = { ...plan, spacings: [{ kind: 'clock' as const, name: 'clock', spacingHz: 1e6 }] };
    await reviseFrequencyPlan({ model: model.slug, plan: next, seen: 1 }, ctx);
    const found = await getFrequencyPlan(database.db, model.slug);
    expect(found?.revisions.map(({ revision, retiredAt }) => [revision, retiredAt === null])).toEqual([
      [2, true],
      [1, false],
    ]);
    expect(await findFrequencyPlan(database.db, model.modelId)).toEqual(next);
  });

  test('that somebody has revised since is not overwritten unseen', async () => {
    const ctx = callAs(database.db, owner.id);
    await reviseFrequencyPlan({ model: model.slug, plan }, ctx);
    await expect(reviseFrequencyPlan({ model: model.slug, plan, seen: 0 }, ctx)).rejects.toMatchObject({
      code: 'conflict',
    });
    expect(await database.db.$count(frequencyPlanRevisions)).toBe(1);
  });

  test('with an oscillator that is not there comes back to its page, and nothing is kept', async () => {
    const columns = { ...planToColumns(plan), carrierExpression: ['XO − BFO'] };
    const { response } = await callDoor(plansDoor, {
      ...sendJson(columns),
      params: { slug: model.slug },
      person: owner,
    });
    const problem = await problemIn(response);
    expect(problem).toMatchObject({ status: 400 });
    expect(problem['fields']).toMatchObject({
      'carrierExpression.0': 'There is no BFO in the plan; it has VFO, XO.',
    });
    expect(await database.db.$count(frequencyPlanRevisions)).toBe(0);
  });

  test('is the owner’s to change', async () => {
    const tester = await letIn(
      await seedPerson(database.db, { roles: ['tester'], email: 'tester@works.example' }),
    );
    const { response } = await callDoor(plansDoor, {
      ...sendJson(planToColumns(plan)),
      params: { slug: model.slug },
      person: tester,
    });
    expect(response.status).toBe(403);
  });
});
