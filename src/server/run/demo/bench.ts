import { eq } from 'drizzle-orm';
import type { TestPoint } from '~/domain/bench/types';
import { instrumentRevisions, instruments, pathRevisions, paths } from '~/server/db/schema';
import { readRunSheet } from '~/server/queries/bench/read-run-sheet';
import { closeRun } from '~/server/services/bench/close-run';
import { openRun } from '~/server/services/bench/open-run';
import { recordReading } from '~/server/services/bench/record-reading';
import { setConditions } from '~/server/services/bench/set-conditions';
import { voidReading } from '~/server/services/bench/void-reading';
import type { WriteContext } from '~/server/write';
import type { DemoUnit } from './orders';
import type { Cast } from './people';
import type { Scene } from './play';
import type { Random } from './random';
import type { Fault, RigTraits } from './readings';
import { textOf } from './readings';

/** How a run is to go. */
export interface RunPlan {
  fault: Fault | null;
  /** Left open after so many readings. */
  stopAfter?: number;
  /** A reading that was taken on the wrong band, voided and taken again. */
  hasVoid?: boolean;
}

interface Equipment {
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
}

const minuteMs = 60_000;
const secondsPerReading = 75;

/** One final test: opened, its conditions and readings entered one by one, and closed. */
export function runScene(
  unit: DemoUnit,
  traits: RigTraits,
  plan: RunPlan,
  at: Date,
  cast: Cast,
  random: Random,
): Scene {
  return {
    at,
    actor: cast.tester,
    play: async (w, then) => {
      const { runId } = await openRun({ serial: unit.serial }, w);
      unit.runId = runId;
      await setConditions(
        {
          runId,
          supplyV: 13.8 + random.whole(-2, 2) / 100,
          ambientC: random.whole(18, 23),
          firmwareVersion: traits.firmware,
          alignment: { Reference: `${traits.referenceHz} Hz`, Offset: `${traits.offsetHz} Hz` },
        },
        w,
      );
      const { points, rule } = await readRunSheet(w.tx, runId);
      const equipmentOf = await readEquipment(w);
      const isStopped = (index: number) => plan.stopAfter !== undefined && index >= plan.stopAfter;
      const failsAt = points.findIndex((point) => isFaulty(point, plan.fault));
      // Half of the testers' failed runs are closed as soon as the first point has failed.
      const last =
        failsAt >= 0 && plan.fault?.kind !== 'too_close' && random.chance(0.5) ? failsAt + 1 : points.length;
      let moment = at;
      for (const [index, point] of points.slice(0, last).entries()) {
        if (isStopped(index)) return;
        moment = new Date(moment.getTime() + secondsPerReading * 1000);
        const isFaultHere = isFaulty(point, plan.fault);
        const fault = isFaultHere ? plan.fault : null;
        const equipment = equipmentOf(point);
        const withVoid = plan.hasVoid === true && index === 1;
        const times = fault?.kind === 'too_close' ? 3 : 1;
        then({
          at: moment,
          actor: cast.tester,
          play: async (inner) => {
            if (withVoid) await readWrongly(inner, runId, point, equipment);
            for (let time = 0; time < times; time += 1) {
              const text = textOf(point, traits, { fault, rule, time }, random);
              await enter(inner, runId, point, text, equipment, withVoid || time > 0);
            }
          },
        });
      }
      then({
        at: new Date(moment.getTime() + 3 * minuteMs),
        actor: cast.tester,
        play: (inner) => closeRun({ runId }, inner),
      });
    },
  };
}

function isFaulty(point: TestPoint, fault: Fault | null): boolean {
  return fault !== null && point.quantity.key === fault.quantityKey && point.band === fault.band;
}

async function enter(
  w: WriteContext,
  runId: number,
  point: TestPoint,
  text: string,
  equipment: Equipment,
  again: boolean,
): Promise<number> {
  const { readingId } = await recordReading(
    { runId, testPointId: point.id, text, again, ...equipment, confirmed: false, attenuationHeld: false },
    w,
  );
  return readingId;
}

async function readWrongly(
  w: WriteContext,
  runId: number,
  point: TestPoint,
  equipment: Equipment,
): Promise<void> {
  const readingId = await enter(w, runId, point, '31.2', equipment, false);
  await voidReading({ runId, readingId, reason: 'The band switch stood on the band before.' }, w);
}

/** Which instrument and path a point is read with. */
async function readEquipment(w: WriteContext): Promise<(point: TestPoint) => Equipment> {
  const instrumentIds = new Map(
    (
      await w.tx
        .select({ number: instruments.number, id: instrumentRevisions.id })
        .from(instrumentRevisions)
        .innerJoin(instruments, eq(instruments.id, instrumentRevisions.instrumentId))
    ).map(({ number, id }) => [number, id]),
  );
  const [tap] = await w.tx
    .select({ id: pathRevisions.id })
    .from(pathRevisions)
    .innerJoin(paths, eq(paths.id, pathRevisions.pathId))
    .where(eq(paths.number, 'T-1'));
  const withPath = (number: string): Equipment => ({
    instrumentRevisionId: instrumentIds.get(number) ?? null,
    pathRevisionId: tap?.id ?? null,
  });
  const alone = (number: string): Equipment => ({ ...withPath(number), pathRevisionId: null });
  return ({ quantity: { key: quantityKey } }) => {
    if (quantityKey === 'rf_power') return withPath('PM-2');
    if (quantityKey.startsWith('harmonic')) return withPath('SA-1');
    if (quantityKey.startsWith('current')) return alone('MM-4');
    if (quantityKey === 'frequency_error') return alone('FC-1');
    return { instrumentRevisionId: null, pathRevisionId: null };
  };
}
