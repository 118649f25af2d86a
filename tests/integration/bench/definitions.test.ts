import { beforeEach, describe, expect, it } from 'vitest';
import { ruleForDestination } from '~/domain/bench/limit-rules';
import { POST as addRule } from '~/pages/api/limit-rules';
import { POST as retireRule } from '~/pages/api/limit-rules/[key]/retirement';
import { POST as drawUp } from '~/pages/api/models';
import { POST as add } from '~/pages/api/quantities';
import { POST as retire } from '~/pages/api/quantities/[key]/retirement';
import type { SignedIn } from '~/server/auth/sessions';
import { limitRuleRevisions, quantityRevisions, testPlanRevisions, testPoints } from '~/server/db/schema';
import { listLimitRules } from '~/server/queries/bench/list-limit-rules';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { seedWorks } from '../../factories/catalog';
import { seedPerson } from '../../factories/people';
import { browser, callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let owner: SignedIn;

beforeEach(async () => {
  await seedWorks(database.db);
  const id = await seedPerson(database.db, { name: 'Mara Quill', roles: ['owner'] });
  owner = { id, name: 'Mara Quill', email: 'mara@thistledown.example', callSign: null, roles: ['owner'] };
});

const post = async (door: typeof add, body: unknown, params = {}, person = owner) =>
  (await callDoor(door, { ...sendJson(body), params, person })).response;

const chirp = {
  ...{ key: 'chirp', label: 'Chirp', format: 'frequency_error', limitSense: 'both', source: 'the works' },
};

describe('a quantity of the works’ own', () => {
  it('stands beside those that ship, with the units that follow from how it is written', async () => {
    expect(await (await post(add, chirp)).json()).toEqual({ key: 'chirp', revision: 1 });
    expect((await listQuantities(database.db)).get('chirp')).toMatchObject({
      unit: 'Hz',
      entryUnits: ['Hz'],
    });
  });

  it('is computed where it has a formula of what is read', async () => {
    const drive = {
      ...chirp,
      key: 'input_power',
      label: 'Input power',
      format: 'power',
      limitSense: 'upper',
    };
    const formula = 'supply_voltage * current_key_down';
    expect((await post(add, { ...drive, formula })).status).toBe(200);
    for (const wrong of ['supply_voltage *', 'nothing * 2', 'input_power', 'efficiency * 2']) {
      const response = await post(add, { ...drive, key: 'other', formula: wrong });
      expect(response.status).toBe(400);
      expect((await problemIn(response))['fields']).toHaveProperty('formula');
    }
  });

  it.each([
    [{ key: 'rf_power' }, 'key', 409],
    [{ key: 'Chirp!' }, 'key', 400],
    [{ label: '' }, 'label', 400],
    [{ format: 'colour' }, 'format', 400],
    [{ source: '' }, 'source', 400],
  ])('is refused with %j, beside its field', async (changes, field, status) => {
    const response = await post(add, { ...chirp, ...changes });
    expect(response.status).toBe(status);
    expect((await problemIn(response))['fields']).toHaveProperty(field);
    expect(await database.db.$count(quantityRevisions)).toBe(0);
  });

  it('is revised as revisions, one editor at a time', async () => {
    await post(add, chirp);
    expect((await post(add, chirp)).status).toBe(409);
    const later = { ...chirp, label: 'Chirp of the first dot', basedOn: 1 };
    expect(await (await post(add, later)).json()).toEqual({ key: 'chirp', revision: 2 });
    expect((await post(add, later)).status).toBe(409);
    expect((await listQuantities(database.db)).get('chirp')?.label).toBe('Chirp of the first dot');
    expect(await database.db.$count(quantityRevisions)).toBe(2);
  });

  it('keeps its meaning while a plan that was released asks for it, and cannot go', async () => {
    await post(add, chirp);
    const model = { name: 'Holm 3', ratedPower: '5 W', supplyV: 13.8, bands: ['40m'] };
    await callDoor(drawUp, { ...sendJson(model), person: owner });
    const [plan] = await database.db.select().from(testPlanRevisions);
    const [{ insertId: testPlanRevisionId }] = await database.db.insert(testPlanRevisions).values({
      ...{
        modelId: plan?.modelId ?? 0,
        letter: 'B',
        state: 'draft',
        supplyV: 13.8,
        loadOhm: 50,
        createdAt: new Date(),
      },
    });
    await database.db.insert(testPoints).values({
      ...{ testPlanRevisionId, position: 1, quantityKey: 'chirp', upperLimit: 50 },
      ...{ limitRule: 'fixed', decision: 'simple' },
    });
    expect((await post(add, { ...chirp, format: 'time', basedOn: 1 })).status).toBe(200);
    expect((await post(retire, {}, { key: 'chirp' })).status).toBe(409);
    await database.db.update(testPlanRevisions).set({ state: 'released' });
    const changed = await post(add, { ...chirp, format: 'power', basedOn: 2 });
    expect(changed.status).toBe(422);
    expect((await problemIn(changed))['detail']).toMatch(/only its name and source can change/);
    expect((await post(add, { ...chirp, format: 'time', label: 'Chirp time', basedOn: 2 })).status).toBe(200);
    await database.db.update(testPlanRevisions).set({ state: 'retired' });
    expect((await post(retire, {}, { key: 'chirp' })).status).toBe(200);
    expect((await listQuantities(database.db)).has('chirp')).toBe(false);
  });

  it('is the owner’s', async () => {
    expect((await post(add, chirp, {}, { ...owner, roles: ['tester'] })).status).toBe(403);
    expect((await post(retire, {}, { key: 'chirp' }, { ...owner, roles: ['tester'] })).status).toBe(403);
  });
});

const rule = {
  ...{ key: 'own_eu', title: 'Our reading of a rule', source: 'a paper in our drawer', edition: '2016' },
  ...{ destinations: 'de, AT', isAutomatic: true },
  clauses: [
    { name: 'below 30 MHz', by: 'transmit', toMhz: '30', requiredDb: 'min(43 + 10 * lg(P), 60)' },
    { name: 'above', by: 'transmit', fromMhz: '30', requiredDb: '60' },
  ],
};

describe('an emission rule of the works’ own', () => {
  it('counts where it says, before what ships, and the works answers for its text', async () => {
    expect((await post(addRule, rule)).status).toBe(200);
    const rules = await listLimitRules(database.db);
    for (const country of ['DE', 'AT']) {
      expect(ruleForDestination(country, '2027-03-09', rules).key).toBe('own_eu');
    }
    expect(ruleForDestination('US', '2027-03-09', rules).key).toBe('us_97_307');
    expect(rules[0]).toMatchObject({ certainty: 'entered', clauses: [{ toHz: 30e6 }, { fromHz: 30e6 }] });
  });

  it('comes from a plain form, whose empty rows are no rows', async () => {
    const form = new URLSearchParams({
      key: 'own_eu',
      title: 'Ours',
      source: 'a paper',
      edition: '2016',
      basedOn: '0',
      formOf: '',
    });
    form.set('destinations', 'DE');
    form.set('isAutomatic', 'on');
    for (const row of [
      ['a', 'product', '', '', '50'],
      ['', 'transmit', '', '', ''],
    ]) {
      ['name', 'by', 'fromMhz', 'toMhz', 'requiredDb'].forEach((name, index) =>
        form.append(name, row[index] ?? ''),
      );
    }
    const { response } = await callDoor(addRule, { body: form, headers: browser, person: owner });
    expect(response.status).toBe(303);
    const [stored] = await listLimitRules(database.db);
    expect(stored?.clauses).toHaveLength(1);
  });

  it.each<[Record<string, unknown>, string, number]>([
    [{ key: 'us_97_307' }, 'key', 409],
    [{ key: 'strictest' }, 'key', 409],
    [{ destinations: 'Germany' }, 'destinations.0', 400],
    [{ destinations: '' }, 'destinations', 400],
    [{ validFrom: 'March' }, 'validFrom', 400],
    [{ clauses: [] }, 'clauses', 400],
    [{ clauses: [{ name: 'a', requiredDb: '43 +' }] }, 'clauses.0.requiredDb', 400],
    [{ clauses: [{ name: 'a', requiredDb: 'Q' }] }, 'clauses.0.requiredDb', 400],
    [{ clauses: [{ name: '', requiredDb: '43' }] }, 'clauses.0.name', 400],
    [{ clauses: [{ name: 'a', requiredDb: '43', fromMhz: '30', toMhz: '1' }] }, 'clauses.0.toMhz', 400],
  ])('is refused with %j, beside its field', async (changes, field, status) => {
    const response = await post(addRule, { ...rule, ...changes });
    expect(response.status).toBe(status);
    expect(Object.keys((await problemIn(response))['fields'] as object)).toContain(field);
    expect(await database.db.$count(limitRuleRevisions)).toBe(0);
  });

  it('is revised as revisions and can be taken out of use', async () => {
    await post(addRule, rule);
    expect((await post(addRule, rule)).status).toBe(409);
    expect(await (await post(addRule, { ...rule, title: 'Read again', basedOn: 1 })).json()).toEqual({
      ...{ key: 'own_eu', revision: 2 },
    });
    expect((await listLimitRules(database.db))[0]?.title).toBe('Read again');
    expect((await post(retireRule, {}, { key: 'own_eu' })).status).toBe(200);
    expect((await post(retireRule, {}, { key: 'own_eu' })).status).toBe(404);
    expect(ruleForDestination('DE', '2027-03-09', await listLimitRules(database.db)).key).toBe(
      'itu_category_a',
    );
    expect((await post(addRule, { ...rule, basedOn: 2 })).status).toBe(200);
  });

  it('is the owner’s', async () => {
    expect((await post(addRule, rule, {}, { ...owner, roles: ['builder'] })).status).toBe(403);
  });
});
