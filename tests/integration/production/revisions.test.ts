import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, it } from 'vitest';
import {
  bomLines,
  bomRevisions,
  buildSteps,
  files,
  parts,
  testPlanRevisions,
  testPoints,
} from '~/server/db/schema';
import { readBomUpload } from '~/server/queries/production/read-bom-upload';
import { acceptBomUpload } from '~/server/services/production/accept-bom-upload';
import { changeBomLine } from '~/server/services/production/change-bom-line';
import { createBomRevision } from '~/server/services/production/create-bom-revision';
import { keepBomUpload } from '~/server/services/production/keep-bom-upload';
import {
  releaseBomRevision,
  releaseBuildSheetRevision,
  releaseTestPlanRevision,
} from '~/server/services/production/release-revision';
import { databaseErrno } from '~/server/write';
import type { CallContext } from '~/server/write';
import { at, seedWorks } from '../../factories/catalog';
import { seedFloor } from '../../factories/floor';
import type { SeededFloor } from '../../factories/floor';
import { seedBuilder } from '../../factories/stores';
import { testDatabase } from '../../setup/database';

const database = testDatabase();
let ctx: CallContext;
let floor: SeededFloor;

beforeEach(async () => {
  await seedWorks(database.db);
  ctx = await seedBuilder(database.db);
  floor = await seedFloor(ctx);
});

const model = 'holm-3';
const line = (changes = {}) => ({ partNumber: 'X-4915', quantity: 1, designators: ['X1'], ...changes });

async function stateOf(letter: string) {
  const [row] = await database.db
    .select({ state: bomRevisions.state })
    .from(bomRevisions)
    .where(eq(bomRevisions.letter, letter));
  return row?.state;
}

describe('rule 6: a released revision does not change', () => {
  it('no line of it, by whatever way', async () => {
    const change: unknown = await database.db
      .update(bomLines)
      .set({ quantity: 99 })
      .catch((error: unknown) => error);
    const removal: unknown = await database.db.delete(bomLines).catch((error: unknown) => error);
    const insertion: unknown = await database.db
      .insert(bomLines)
      .values({
        bomRevisionId: floor.model.bomRevisionId,
        lineNo: 99,
        partId: 1,
        quantity: 1,
        designators: [],
      })
      .catch((error: unknown) => error);
    expect([change, removal, insertion].map(databaseErrno)).toEqual([1644, 1644, 1644]);
    const step: unknown = await database.db
      .update(buildSteps)
      .set({ title: 'Skip it' })
      .catch((error: unknown) => error);
    expect(databaseErrno(step)).toBe(1644);
    await expect(
      changeBomLine({ model, letter: 'B', lineNo: 1, quantity: 3, condition: null }, ctx),
    ).rejects.toThrow('BOM B is released and does not change; draft a new one.');
  });

  it('is released once', async () => {
    await createBomRevision({ model, note: '', lines: [line()] }, ctx);
    const tries = await Promise.allSettled([1, 2].map(() => releaseBomRevision({ model, letter: 'C' }, ctx)));
    expect(tries.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('retires the one before, which the new one names', async () => {
    const { bomRevisionId, letter } = await createBomRevision(
      { model, note: 'crystal moved', lines: [line()] },
      ctx,
    );
    expect(letter).toBe('C');
    await releaseBomRevision({ model, letter }, ctx);
    expect([await stateOf('A'), await stateOf('B'), await stateOf('C')]).toEqual([
      'retired',
      'retired',
      'released',
    ]);
    const [row] = await database.db.select().from(bomRevisions).where(eq(bomRevisions.id, bomRevisionId));
    expect(row?.replacesId).toBe(floor.model.bomRevisionId);
  });
});

describe('a BOM is checked at its release, for every allowed combination', () => {
  it.each([
    { lines: [], says: 'The BOM has no line.' },
    { lines: [line({ condition: 'filter.wide' })], says: 'the model has no option “filter.wide”' },
    { lines: [line({ condition: 'filter.narrow and' })], says: /condition “filter.narrow and”/ },
    {
      lines: [line(), line({ partNumber: 'Q-RD16', condition: 'band.15m' })],
      says: /X1 is filled twice, by line 1 and line 2/,
    },
  ])('$says', async ({ lines, says }) => {
    const { letter } = await createBomRevision({ model, note: '', lines }, ctx);
    const tried = releaseBomRevision({ model, letter }, ctx);
    await expect(tried).rejects.toThrow(says);
    await expect(tried).rejects.toMatchObject({ code: 'refused' });
    expect(await stateOf(letter)).toBe('draft');
  });

  it('a draft is mended and then passes', async () => {
    const { letter } = await createBomRevision(
      { model, note: '', lines: [line(), line({ partNumber: 'Q-RD16' })] },
      ctx,
    );
    await changeBomLine({ model, letter, lineNo: 1, quantity: 1, condition: 'filter.narrow' }, ctx);
    await changeBomLine({ model, letter, lineNo: 2, quantity: 1, condition: 'not filter.narrow' }, ctx);
    await releaseBomRevision({ model, letter }, ctx);
    expect(await stateOf(letter)).toBe('released');
  });

  it('names parts that are not in the books', async () => {
    await expect(
      createBomRevision({ model, note: '', lines: [line({ partNumber: 'NOBODY' })] }, ctx),
    ).rejects.toThrow('These parts are not in the books: NOBODY.');
  });
});

describe('build sheets and test plans', () => {
  it('are refused empty or unknown', async () => {
    await expect(releaseBuildSheetRevision({ model, letter: 'Z' }, ctx)).rejects.toMatchObject({
      code: 'not_found',
    });
    await database.db.insert(testPlanRevisions).values({
      modelId: floor.model.modelId,
      letter: 'B',
      state: 'draft',
      supplyV: 13.8,
      loadOhm: 50,
      createdAt: at,
    });
    await expect(releaseTestPlanRevision({ model, letter: 'B' }, ctx)).rejects.toThrow(
      'The test plan has no point.',
    );
  });

  it('a test plan with its limits is released, and its points then stand', async () => {
    const [{ insertId: testPlanRevisionId }] = await database.db.insert(testPlanRevisions).values({
      modelId: floor.model.modelId,
      letter: 'B',
      state: 'draft',
      supplyV: 13.8,
      loadOhm: 50,
      createdAt: at,
    });
    const point = {
      testPlanRevisionId,
      quantityKey: 'rf_power',
      band: '40m',
      freqHz: 7_030_000,
      limitRule: 'fixed',
      decision: 'guarded',
    } as const;
    await database.db.insert(testPoints).values({ ...point, position: 1, lowerLimit: 4.5 });
    await releaseTestPlanRevision({ model, letter: 'B' }, ctx);
    const error: unknown = await database.db
      .insert(testPoints)
      .values({ ...point, position: 2, lowerLimit: 1 })
      .catch((caught: unknown) => caught);
    expect(databaseErrno(error)).toBe(1644);
  });
});

describe('a bill of materials from a file', () => {
  const csv =
    'Reference,Value,Footprint,Qty\n"R1-R3",4.7k,R_0805,3\nX1,4.9152MHz,HC49,1\nC1,100n,0603,2\nC9,10n,0603,1\n';
  const bytes = (text: string) => new TextEncoder().encode(text);

  it('is understood, matched with the books, and its contradictions are asked about', async () => {
    const { fileId, questions } = await keepBomUpload({ model, bytes: bytes(csv), name: 'holm.csv' }, ctx);
    expect(questions).toEqual([
      'Line 4: the quantity is 2, but one designator (C1) is named. Which is right?',
    ]);
    const reading = await readBomUpload(database.db, fileId);
    expect(reading.lines.map(({ match, proposal }) => match?.number ?? proposal)).toEqual([
      'R-0805-4K7',
      'X-4915',
      'C-0603-100N',
      'C-0603-10N',
    ]);
  });

  it('becomes a draft once its questions were read; parts that were missing are entered', async () => {
    const { fileId } = await keepBomUpload({ model, bytes: bytes(csv), name: 'holm.csv' }, ctx);
    const accept = { model, fileId, note: '', questionsRead: false };
    await expect(acceptBomUpload(accept, ctx)).rejects.toMatchObject({ code: 'refused' });
    const accepted = await acceptBomUpload(
      { ...accept, questionsRead: true, parts: ['R-0805-4K7', 'X-4915', 'C-100N', ''] },
      ctx,
    );
    expect(accepted).toMatchObject({ letter: 'C', lines: 3, partsEntered: 1 });
    const drafted = await database.db
      .select({ number: parts.number, quantity: bomLines.quantity, designators: bomLines.designators })
      .from(bomLines)
      .innerJoin(parts, eq(parts.id, bomLines.partId))
      .where(eq(bomLines.bomRevisionId, accepted.bomRevisionId))
      .orderBy(bomLines.lineNo);
    expect(drafted).toEqual([
      { number: 'R-0805-4K7', quantity: 3, designators: ['R1', 'R2', 'R3'] },
      { number: 'X-4915', quantity: 1, designators: ['X1'] },
      { number: 'C-100N', quantity: 2, designators: ['C1'] },
    ]);
  });

  it('nothing is entered where one number cannot be used', async () => {
    const before = await database.db.$count(parts);
    const { fileId } = await keepBomUpload({ model, bytes: bytes(csv), name: 'holm.csv' }, ctx);
    await expect(
      acceptBomUpload(
        { model, fileId, note: '', questionsRead: true, parts: ['R-0805-4K7', 'X-4915', 'C-100N', '?'] },
        ctx,
      ),
    ).rejects.toThrow('Line 5: “?” cannot be a part');
    expect(await database.db.$count(parts)).toBe(before);
    expect(await stateOf('C')).toBeUndefined();
  });

  it.each([
    {
      what: 'a picture',
      bytes: Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 1, 2, 3, 0]),
    },
    { what: 'a letter', bytes: bytes('Dear works,\nplease build me a rig.\n') },
  ])('$what is refused with a sentence and not kept', async ({ bytes: wrong }) => {
    const tried = keepBomUpload({ model, bytes: wrong, name: 'holm.csv' }, ctx);
    await expect(tried).rejects.toMatchObject({ code: 'refused' });
    await expect(tried).rejects.toThrow(/^“holm.csv” was not taken\. .+\.$/);
    expect(await database.db.$count(files)).toBe(0);
  });
});
