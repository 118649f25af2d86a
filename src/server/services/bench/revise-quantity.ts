import { and, desc, eq, isNull, ne } from 'drizzle-orm';
import { FORMULA_CONSTANTS, ownQuantity, shippedQuantity } from '~/domain/bench/quantities';
import type { Quantity } from '~/domain/bench/quantities';
import { parseFormula } from '~/domain/formula/formula';
import { quantitySchema } from '~/schemas/bench-definitions';
import type { QuantityEdit } from '~/schemas/definitions-edit';
import { quantityRevisions, testPlanRevisions, testPoints } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { databaseErrno, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';

const duplicate = 1062;

/**
 * Adds a quantity of the works' own, or makes its next revision. What a test plan that was released uses of it does not
 * change in what it means: only its name and source do.
 *
 * @throws DomainError `conflict` where the key ships or is taken, or somebody else has changed it; `invalid` for a formula;
 * `refused` where a released plan stands against it
 */
export async function reviseQuantity(
  input: QuantityEdit,
  ctx: Ctx,
): Promise<{ key: string; revision: number }> {
  const { basedOn, ...row } = input;
  if (shippedQuantity(row.key) !== undefined) {
    const sentence = `${row.key} ships with the program; choose another key.`;
    throw new DomainError('conflict', sentence, { key: sentence });
  }
  const definition = ownQuantity(row);
  return write(ctx, async (w) => {
    const [newest] = await w.tx
      .select()
      .from(quantityRevisions)
      .where(eq(quantityRevisions.key, row.key))
      .orderBy(desc(quantityRevisions.revision))
      .limit(1)
      .for('update');
    mustFollow(newest?.revision ?? 0, basedOn, row.key);
    await mustBeReadable(w, definition);
    if (newest !== undefined) await mustMeanTheSame(w, quantitySchema.parse(newest.definition), definition);
    const revision = basedOn + 1;
    await w.tx
      .update(quantityRevisions)
      .set({ retiredAt: w.now })
      .where(and(eq(quantityRevisions.key, row.key), isNull(quantityRevisions.retiredAt)));
    const [{ insertId: id }] = await w.tx
      .insert(quantityRevisions)
      .values({ key: row.key, revision, definition, createdAt: w.now })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        throw changedMeanwhile(row.key);
      });
    await w.record({
      action: basedOn === 0 ? 'quantity.add' : 'quantity.revise',
      subjects: [{ type: 'quantity_revision', id }],
      details: { key: row.key, revision, to: definition },
    });
    return { key: row.key, revision };
  });
}

function changedMeanwhile(key: string): DomainError {
  return new DomainError('conflict', `Somebody else has changed ${key} meanwhile. Look at it again.`);
}

function mustFollow(present: number, basedOn: number, key: string): void {
  if (present === basedOn) return;
  if (basedOn > 0) throw changedMeanwhile(key);
  const sentence = `There is a quantity ${key} already; revise that one, or choose another key.`;
  throw new DomainError('conflict', sentence, { key: sentence });
}

/** A formula names quantities that are read, and facts of the run. */
async function mustBeReadable(w: WriteContext, { key, formula }: Quantity): Promise<void> {
  if (formula === null) return;
  const book = await listQuantities(w.tx);
  const known = [...book.values()]
    .filter((quantity) => quantity.formula === null && quantity.key !== key)
    .map((quantity) => quantity.key);
  const parsed = parseFormula(formula, [...known, ...FORMULA_CONSTANTS]);
  if (parsed.ok) return;
  const at = parsed.at > 0 ? ` (at character ${String(parsed.at + 1)})` : '';
  const sentence =
    parsed.reason.length > 160
      ? 'It names something that is not read here; the keys stand in the list above.'
      : `${parsed.reason}${at}`;
  throw new DomainError('invalid', sentence, { formula: sentence });
}

async function mustMeanTheSame(w: WriteContext, before: Quantity, after: Quantity): Promise<void> {
  const meaning = ({ format, unit, path, limitSense, formula }: Quantity) =>
    JSON.stringify([format, unit, path, limitSense, formula]);
  if (meaning(before) === meaning(after)) return;
  const [used] = await w.tx
    .select({ letter: testPlanRevisions.letter })
    .from(testPoints)
    .innerJoin(testPlanRevisions, eq(testPlanRevisions.id, testPoints.testPlanRevisionId))
    .where(and(eq(testPoints.quantityKey, before.key), ne(testPlanRevisions.state, 'draft')))
    .limit(1);
  if (used === undefined) return;
  throw new DomainError(
    'refused',
    `Test plan ${used.letter} was released with ${before.key} as it is: only its name and source can change. Add another quantity.`,
  );
}
