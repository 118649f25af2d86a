import { and, eq, isNull } from 'drizzle-orm';
import { readStep } from '~/domain/bench/accuracy-text';
import { checkValue, mayBeChecked } from '~/domain/bench/daily-check';
import { parseEntry } from '~/domain/bench/entry';
import type { Quantity } from '~/domain/bench/quantities';
import type { SpecHalfWidth } from '~/domain/bench/types';
import type { NewCheckReference } from '~/schemas/bench-checks';
import { pathSpecSchema } from '~/schemas/bench-specs';
import { checkReferences, instrumentRevisions, pathRevisions } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { listQuantities } from '~/server/queries/bench/list-quantities';
import { databaseErrno, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';

const duplicate = 1062;

function refuse(sentence: string, field: keyof NewCheckReference): DomainError {
  return new DomainError('refused', sentence, { [field]: sentence });
}

/**
 * Defines what the works measures at the start of a session, and the band it has to read in.
 *
 * @throws DomainError `conflict` where the number is taken; `refused` for what cannot be measured or judged
 */
export async function defineCheckReference(
  input: NewCheckReference,
  ctx: Ctx,
): Promise<{ checkReferenceId: number; number: string }> {
  const { number, name, quantityKey, instrumentId, pathId } = input;
  return write(ctx, async (w) => {
    const quantity = (await listQuantities(w.tx)).get(quantityKey);
    if (quantity === undefined || !mayBeChecked(quantity)) {
      throw refuse('Choose a quantity that an instrument reads.', 'quantityKey');
    }
    await mustBeUsable(w, input, quantity);
    const nominal = nominalOf(input, quantity);
    const [{ insertId: checkReferenceId }] = await w.tx
      .insert(checkReferences)
      .values({
        ...{ number, name, quantityKey, instrumentId, pathId, nominal },
        freqHz: freqHzOf(input.freqMHz),
        tolerance: toleranceOf(input, quantity, nominal),
        createdAt: w.now,
      })
      .catch((error: unknown) => {
        if (databaseErrno(error) !== duplicate) throw error;
        const sentence = `There is a reference ${number} already.`;
        throw new DomainError('conflict', sentence, { number: sentence });
      });
    await w.record({
      action: 'check.define',
      subjects: [
        { type: 'check_reference', id: checkReferenceId },
        { type: 'instrument', id: instrumentId },
      ],
      details: { number, quantity: quantityKey, nominal: input.nominal, tolerance: input.tolerance },
    });
    return { checkReferenceId, number };
  });
}

async function mustBeUsable(
  w: WriteContext,
  { instrumentId, pathId, freqMHz }: NewCheckReference,
  quantity: Quantity,
): Promise<void> {
  const [instrument] = await w.tx
    .select({ id: instrumentRevisions.id })
    .from(instrumentRevisions)
    .where(and(eq(instrumentRevisions.instrumentId, instrumentId), isNull(instrumentRevisions.retiredAt)));
  if (instrument === undefined) throw refuse('Choose an instrument that is in use.', 'instrumentId');
  if (freqMHz === null && (quantity.path !== 'none' || quantity.order !== null)) {
    throw refuse('State the frequency: what a path loses depends on it.', 'freqMHz');
  }
  if (pathId === null) return;
  if (quantity.path === 'none') {
    throw refuse(`A path does nothing to ${quantity.label.toLowerCase()}: choose none.`, 'pathId');
  }
  const [path] = await w.tx
    .select({ spec: pathRevisions.spec })
    .from(pathRevisions)
    .where(and(eq(pathRevisions.pathId, pathId), isNull(pathRevisions.retiredAt)));
  if (path === undefined) throw refuse('Choose a path that is in use.', 'pathId');
  const at = { quantity, freqHz: freqHzOf(freqMHz) };
  const through = checkValue(at, 1, pathSpecSchema.parse(path.spec));
  if (!through.ok) throw refuse(through.reason, 'pathId');
}

/** Whole Hz, as a decimal of MHz has no exact double. */
function freqHzOf(freqMHz: number | null): number | null {
  return freqMHz === null ? null : Math.round(freqMHz * 1e6);
}

function nominalOf(input: NewCheckReference, quantity: Quantity): number {
  const read = parseEntry(input.nominal, quantity, { confirmed: true });
  if (!read.ok) throw refuse(read.reason, 'nominal');
  return read.value;
}

/** In dB for powers and levels, else in the unit of the quantity inside. */
function toleranceOf(input: NewCheckReference, quantity: Quantity, nominal: number): number {
  const read = readStep(input.tolerance, quantity);
  if (!read.ok) throw refuse(read.reason, 'tolerance');
  if (read.step === null || read.step.halfWidth === 0) {
    throw refuse('State how far it may be off: more than 0.', 'tolerance');
  }
  const inside = insideUnit(read.step, quantity, nominal);
  if (inside === null) throw refuse('State how far it may be off in dB.', 'tolerance');
  return inside;
}

function insideUnit({ halfWidth, unit }: SpecHalfWidth, quantity: Quantity, nominal: number): number | null {
  if (quantity.unit === 'W') return unit === 'dB' ? halfWidth : null;
  if (unit === 'percent') return Math.abs(nominal) * (halfWidth / 100);
  if (unit === 'ppm') return Math.abs(nominal) * (halfWidth / 1e6);
  return halfWidth;
}
