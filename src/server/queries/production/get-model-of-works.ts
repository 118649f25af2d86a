import { asc, eq } from 'drizzle-orm';
import type { RevisionKind } from '~/schemas/production-models';
import { compareLetters } from '~/lib/revision-letters';
import type { TestPoint } from '~/domain/bench/types';
import type { Reader } from '~/server/db/client';
import {
  bomRevisions,
  buildSheetRevisions,
  buildSteps,
  models,
  testPlanRevisions,
  userProfiles,
} from '~/server/db/schema';
import { listTestPoints } from '~/server/queries/bench/read-run-sheet';
import { readBomLines } from './read-bom';

export interface RevisionRow {
  id: number;
  letter: string;
  state: 'draft' | 'released' | 'retired';
  note: string;
  createdAt: Date;
  releasedAt: Date | null;
  releasedBy: string | null;
}

/** A model with the revisions of its BOM, build sheet and test plan, newest first; null where there is none. */
export async function getModelOfWorks(reader: Reader, slug: string) {
  const [model] = await reader
    .select({
      id: models.id,
      slug: models.slug,
      name: models.name,
      tagline: models.tagline,
      state: models.state,
    })
    .from(models)
    .where(eq(models.slug, slug));
  if (model === undefined) return null;
  const [boms, buildSheets, testPlans] = await Promise.all([
    listRevisions(reader, bomRevisions, model.id),
    listRevisions(reader, buildSheetRevisions, model.id),
    listRevisions(reader, testPlanRevisions, model.id),
  ]);
  return { model, revisions: { bom: boms, build_sheet: buildSheets, test_plan: testPlans } };
}

async function listRevisions(
  reader: Reader,
  table: typeof bomRevisions | typeof buildSheetRevisions | typeof testPlanRevisions,
  modelId: number,
): Promise<RevisionRow[]> {
  const rows = await reader
    .select({
      id: table.id,
      letter: table.letter,
      state: table.state,
      note: table.note,
      createdAt: table.createdAt,
      releasedAt: table.releasedAt,
      releasedBy: userProfiles.name,
    })
    .from(table)
    .leftJoin(userProfiles, eq(userProfiles.userId, table.releasedBy))
    .where(eq(table.modelId, modelId));
  return rows.sort((a, b) => compareLetters(b.letter, a.letter));
}

export type RevisionContent =
  | { kind: 'bom'; lines: Awaited<ReturnType<typeof readBomLines>> }
  | { kind: 'build_sheet'; steps: (typeof buildSteps.$inferSelect)[] }
  | { kind: 'test_plan'; points: TestPoint[] };

/** What stands in a revision. */
export async function readRevision(
  reader: Reader,
  kind: RevisionKind,
  revisionId: number,
): Promise<RevisionContent> {
  switch (kind) {
    case 'bom':
      return { kind, lines: await readBomLines(reader, revisionId) };
    case 'build_sheet': {
      const { buildSheetRevisionId, position } = buildSteps;
      const steps = reader.select().from(buildSteps).where(eq(buildSheetRevisionId, revisionId));
      return { kind, steps: await steps.orderBy(asc(position)) };
    }
    case 'test_plan': {
      return { kind, points: await listTestPoints(reader, revisionId) };
    }
  }
}
