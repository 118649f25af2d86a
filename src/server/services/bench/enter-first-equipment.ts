import { eq } from 'drizzle-orm';
import { lossTableText } from '~/domain/bench/loss-table';
import type { InstrumentSpec, SpecHalfWidth } from '~/domain/bench/types';
import type { FirstEquipment } from '~/schemas/bench-alone';
import { instruments, pathParts, paths } from '~/server/db/schema';
import { nextNumber, write } from '~/server/write';
import type { Ctx, WriteContext } from '~/server/write';
import { createInstrument } from './create-instrument';
import { createPath } from './create-path';
import { createPathPart } from './create-path-part';

/** Over which a loss that was given as one figure is taken to be the same, Hz. */
const flatFromHz = 1e6;
const flatToHz = 1e9;

/**
 * Enters an instrument by its published accuracy alone, and the attenuation before it as a path where there is any.
 * The accuracy of both together stands with the instrument.
 */
export async function enterFirstEquipment(
  input: FirstEquipment,
  ctx: Ctx,
): Promise<{ instrumentNumber: string; pathNumber: string | null }> {
  return write(ctx, async (w) => {
    const instrument = await createInstrument(
      { number: await freeNumber(w, instruments, 'M'), name: input.name, spec: specOf(input) },
      w,
    );
    const path = input.attenuationDb === 0 ? null : await buildPath(w, input);
    await w.record({
      action: 'bench.equip',
      subjects: [
        { type: 'instrument', id: instrument.instrumentId },
        ...(path === null ? [] : [{ type: 'path' as const, id: path.pathId }]),
      ],
    });
    return { instrumentNumber: instrument.number, pathNumber: path?.number ?? null };
  });
}

/** A path of one part, of which nothing is known but how much it attenuates. */
async function buildPath(
  w: WriteContext,
  { name, attenuationDb, ratingW }: FirstEquipment,
): Promise<{ pathId: number; number: string }> {
  const part = await createPathPart(
    {
      number: await freeNumber(w, pathParts, 'A'),
      name: `${attenuationDb} dB, taken as the same from 1 MHz to 1 GHz`,
      lossTable: lossTableText([
        [flatFromHz, attenuationDb],
        [flatToHz, attenuationDb],
      ]),
      ...{ uncertaintyDb: 0, k: 2, flatnessDb: null, ratingW, vswr: null },
    },
    w,
  );
  return createPath(
    {
      number: await freeNumber(w, paths, 'P'),
      name: `${attenuationDb} dB before ${name}`.slice(0, 120),
      ...{ direction: 'to_instrument', parts: [part.number] },
    },
    w,
  );
}

/** The next of the series that nobody has given to one of their own. */
async function freeNumber(
  w: WriteContext,
  table: typeof instruments | typeof paths | typeof pathParts,
  prefix: 'M' | 'P' | 'A',
): Promise<string> {
  for (;;) {
    const number = `${prefix}-${await nextNumber(w.tx, `equipment:${prefix}`)}`;
    const [taken] = await w.tx.select({ id: table.id }).from(table).where(eq(table.number, number));
    if (taken === undefined) return number;
  }
}

function specOf(input: FirstEquipment): InstrumentSpec {
  const { levelDb, ratioDb, ownDistortionDb, currentPercent, frequencyPpm } = input;
  const good = (halfWidth: number, unit: SpecHalfWidth['unit']) => ({
    accuracy: [{ halfWidth, unit }],
    resolution: null,
  });
  return {
    grade: 'unchecked',
    checkedAgainst: null,
    quantities: {
      rf_power: good(levelDb, 'dB'),
      ...(ratioDb === null ? {} : { harmonic: good(levelDb, 'dB') }),
      ...(currentPercent === null
        ? {}
        : {
            current_rest: good(currentPercent, 'percent'),
            current_key_down: good(currentPercent, 'percent'),
          }),
      ...(frequencyPpm === null ? {} : { frequency_error: good(frequencyPpm, 'ppm') }),
    },
    // One figure was given for a ratio; it is not halved between two causes.
    linearityDb: ratioDb,
    flatnessDb: ratioDb === null ? null : 0,
    vswr: null,
    detector: null,
    ownDistortionDbc: ownDistortionDb === null ? null : -ownDistortionDb,
    calibration: null,
  };
}
