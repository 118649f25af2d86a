import { isBareNumber } from '~/domain/bench/bare-number';
import { judgeRun, pointLabel } from '~/domain/bench/judge-run';
import type { TestPoint } from '~/domain/bench/types';
import { invariant } from '~/lib/invariant';
import { listed } from '~/lib/listed';
import type { RecordedReadings, WireReading } from '~/schemas/bench-wire';
import { DomainError } from '~/server/errors';
import type { FieldErrors } from '~/server/errors';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import type { StoredSheet } from '~/server/queries/bench/read-run-sheet';
import { write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { equipmentByNumber } from './equipment-by-number';
import { findOpenRun } from './find-open-run';
import { recordReading } from './record-reading';

/**
 * Records what a script has read into open runs of its person: all of it, or nothing. A point that was read already is
 * corrected as by retyping, with both values in the ledger of changes.
 *
 * @returns each reading with its point's judgement once all of them stand
 * @throws DomainError with a sentence for each refused reading, at fields such as `0.text`; its code is the first's
 */
export async function recordWireReadings(input: readonly WireReading[], ctx: Ctx): Promise<RecordedReadings> {
  return write(ctx, async (w) => {
    const put: Recorded[] = [];
    const refused: { index: number; error: DomainError }[] = [];
    for (const [index, reading] of input.entries()) {
      try {
        put.push(await recordOne(w, reading));
      } catch (error) {
        if (!(error instanceof DomainError)) throw error;
        refused.push({ index, error });
      }
    }
    const [first] = refused;
    if (first !== undefined) throw noneRecorded(first.error, refused, input.length);
    await w.record({
      action: 'reading.send',
      subjects: put.flatMap(({ runId, unitId }) => [
        { type: 'run' as const, id: runId },
        { type: 'unit' as const, id: unitId },
      ]),
      details: { readings: put.length },
    });
    return judged(w, put);
  });
}

interface Recorded {
  runId: number;
  runNo: number;
  serial: string;
  unitId: number;
  point: TestPoint;
  reading: { readingId: number; readingNo: number; version: number };
}

async function recordOne(w: WriteContext, sent: WireReading): Promise<Recorded> {
  const run = await findOpenRun(w, sent.serial);
  const sheet = await readRunSheet(w.tx, run.runId);
  const point = pointOf(sheet, sent, run.serial);
  const equipment = await equipmentByNumber(w, sent);
  const { again, confirmed, attenuationHeld, version } = sent;
  const reading = await recordReading(
    {
      ...{ runId: run.runId, testPointId: point.id, text: textOf(sent, point), ...equipment },
      ...{ again, confirmed, attenuationHeld, version, source: 'wire' },
    },
    w,
  );
  return { ...run, point, reading };
}

function refuse(field: keyof WireReading, sentence: string): DomainError {
  return new DomainError('refused', sentence, { [field]: sentence });
}

/** The test point that is meant. */
function pointOf({ points }: StoredSheet, sent: WireReading, serial: string): TestPoint {
  const ofQuantity = points.filter(({ quantity }) => quantity.key === sent.quantity);
  const [any] = ofQuantity;
  if (any === undefined) {
    const keys = [...new Set(points.map(({ quantity }) => quantity.key))];
    throw refuse(
      'quantity',
      `The test plan of ${serial} does not ask for ${sent.quantity}; it asks for ${listed(keys)}.`,
    );
  }
  if (any.quantity.formula !== null) {
    throw refuse('quantity', `${any.quantity.label} is computed from other readings: send those.`);
  }
  const onBand = ofQuantity.filter(({ band }) => band === sent.band);
  if (onBand.length === 0) {
    const bands = ofQuantity.map(({ band }) => band ?? 'no band');
    throw refuse(
      'band',
      `The test plan of ${serial} has ${sent.quantity} on ${listed(bands)}, not on ${sent.band ?? 'no band'}.`,
    );
  }
  const found = sent.freqHz === undefined ? onBand : onBand.filter(({ freqHz }) => freqHz === sent.freqHz);
  const [point, another] = found;
  if (point === undefined || another !== undefined) {
    const known = listed(onBand.map(({ freqHz }) => String(freqHz)));
    throw refuse('freqHz', `Say which test frequency is meant, in Hz: ${known}.`);
  }
  return point;
}

/** What is kept as entered. A bare number is refused: a script remembers no column's unit. */
function textOf({ text, productFreqHz }: WireReading, { quantity }: TestPoint): string {
  const takesBare = quantity.unit === '' || quantity.unit === '1';
  if (!takesBare && isBareNumber(text)) {
    throw refuse('text', `Send the unit with the value, as ${quantity.entryUnits.join(' or ')}.`);
  }
  if (productFreqHz === undefined) return text;
  if (quantity.key !== 'spurious') {
    throw refuse('productFreqHz', `${quantity.label} has no frequency of its own: leave it out.`);
  }
  return `${text} @ ${String(productFreqHz)} Hz`;
}

function noneRecorded(
  first: DomainError,
  refused: readonly { index: number; error: DomainError }[],
  sent: number,
): DomainError {
  const fields: FieldErrors = {};
  for (const { index, error } of refused) {
    const named = Object.entries(error.fields);
    if (named.length === 0) fields[String(index)] = error.message;
    for (const [field, sentence] of named) fields[`${String(index)}.${field}`] = sentence;
  }
  if (sent === 1) return new DomainError(first.code, first.message, fields);
  return new DomainError(
    first.code,
    `Nothing was recorded: ${String(refused.length)} of ${String(sent)} readings were refused. The first: ${first.message}`,
    fields,
  );
}

async function judged(w: WriteContext, put: readonly Recorded[]): Promise<RecordedReadings> {
  const judgementsOf = new Map<number, ReturnType<typeof judgeRun>['judgements']>();
  for (const runId of new Set(put.map((each) => each.runId))) {
    judgementsOf.set(runId, judgeRun(await readRunSheet(w.tx, runId)).judgements);
  }
  return {
    readings: put.map(({ runId, runNo, serial, point, reading }) => {
      const judgement = judgementsOf.get(runId)?.get(point.id);
      invariant(judgement !== undefined, 'every point is judged');
      const { quantity, band } = point;
      return {
        ...{ serial, runNo, quantity: quantity.key, band, ...reading },
        judgement: { ...judgement, unit: quantity.unit, testPointId: point.id, label: pointLabel(point) },
      };
    }),
  };
}
