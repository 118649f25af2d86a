import { and, asc, eq, gt } from 'drizzle-orm';
import { evaluateCondition, parseCondition } from '~/domain/planning/condition';
import { invariant } from '~/lib/invariant';
import { buildSteps, lots, units } from '~/server/db/schema';
import { readKit } from '~/server/queries/production/read-kit';
import { closeRework } from '~/server/services/production/close-rework';
import { finishKit } from '~/server/services/production/finish-kit';
import { pickForUnit } from '~/server/services/production/pick-for-unit';
import { tickStep } from '~/server/services/production/tick-step';
import { undoPick } from '~/server/services/production/undo-pick';
import type { WriteContext } from '~/server/write';
import type { DemoUnit } from './orders';
import type { Cast } from './people';
import type { Scene } from './play';
import type { Random } from './random';
import type { DemoStep } from './sheets';
import { demoSteps } from './sheets';

/** How far a unit is to be built. */
export type BuiltTo = 'picking' | 'kitted' | 'boards' | 'aligning' | 'built';

const minuteMs = 60_000;
/** How many of the steps of boards and alignment are done, as a share. */
const shareDone: Record<BuiltTo, number> = { picking: 0, kitted: 0, boards: 0.35, aligning: 0.75, built: 1 };

/** A unit's way from its kit to the end of its build sheet, or to where it is to stop. */
export function buildScenes(
  unit: DemoUnit,
  model: { slug: string; option: readonly string[] },
  to: BuiltTo,
  /** When its kit is picked. */
  from: Date,
  cast: Cast,
  random: Random,
): Scene[] {
  const kit: Scene = {
    at: from,
    actor: cast.builder,
    play: (w) => pickKit(w, unit, to === 'picking' ? 3 : Infinity),
  };
  if (to === 'picking') return [kit];
  const scenes: Scene[] = [
    kit,
    {
      at: later(from, random.whole(12, 30)),
      actor: cast.builder,
      play: (w) => finishKit({ serial: unit.serial, minutes: random.whole(18, 34) }, w),
    },
  ];
  const steps = stepsOf(model).filter(({ stage }) => stage !== 'kit');
  const todo = steps.slice(0, Math.round(steps.length * shareDone[to]));
  let at = later(from, random.whole(60, 150));
  let stage = todo[0]?.stage;
  for (const step of todo) {
    // Alignment begins the next morning, and a soak ends on one.
    if (step.stage !== stage || step.title.startsWith('Soak')) at = nextMorning(at, random);
    stage = step.stage;
    const minutes = Math.max(2, Math.round(step.minutes * random.between(0.75, 1.35)));
    at = later(at, minutes);
    const entry = entryOf(step, random);
    scenes.push({ at, actor: cast.builder, play: (w) => tick(w, unit, step.title, entry, minutes) });
  }
  return scenes;
}

function stepsOf({ slug, option }: { slug: string; option: readonly string[] }): DemoStep[] {
  const chosen = new Set(option);
  return demoSteps(slug).filter(({ condition }) => {
    const parsed = condition === undefined ? null : parseCondition(condition);
    return parsed === null || (parsed.ok && evaluateCondition(parsed.ast, chosen));
  });
}

function nextMorning(at: Date, random: Random): Date {
  const midnight = Date.UTC(at.getUTCFullYear(), at.getUTCMonth(), at.getUTCDate() + 1);
  return later(new Date(midnight), random.whole(8 * 60, 10 * 60));
}

function later(at: Date, minutes: number): Date {
  return new Date(at.getTime() + minutes * minuteMs);
}

function entryOf({ entry, usual }: DemoStep, random: Random): string | undefined {
  if (entry === undefined) return undefined;
  if (usual === undefined)
    return random.pick(['Nothing odd.', 'Steady all night.', 'Fan off, 23 °C in the room.']);
  const bounded = Math.min(
    (entry.upper ?? Infinity) - usual.spread / 2,
    Math.max((entry.lower ?? -Infinity) + usual.spread / 2, usual.mean + random.normal() * usual.spread),
  );
  return bounded.toFixed(usual.spread < 0.1 ? 2 : 0);
}

async function tick(
  w: WriteContext,
  unit: DemoUnit,
  title: string,
  entry: string | undefined,
  minutes: number,
): Promise<void> {
  unit.stepIds ??= await readStepIds(w, unit.serial);
  const stepId = unit.stepIds.get(title);
  invariant(stepId !== undefined, `${unit.serial} has the step “${title}”`);
  await tickStep({ serial: unit.serial, stepId, entry, minutes }, w);
}

async function readStepIds(w: WriteContext, serial: string): Promise<Map<string, number>> {
  const steps = await w.tx
    .select({ id: buildSteps.id, title: buildSteps.title })
    .from(buildSteps)
    .innerJoin(units, eq(units.buildSheetRevisionId, buildSteps.buildSheetRevisionId))
    .where(eq(units.serial, serial));
  return new Map(steps.map(({ id, title }) => [title, id]));
}

/** Picks so many lines of the parts that are scanned, oldest lots first. */
async function pickKit(w: WriteContext, unit: DemoUnit, most: number): Promise<void> {
  const [row] = await w.tx.select().from(units).where(eq(units.serial, unit.serial));
  invariant(row !== undefined, `${unit.serial} is there`);
  const lines = (await readKit(w.tx, row)).filter(
    ({ part, missing }) => part.trace === 'each' && missing > 0,
  );
  for (const line of lines.slice(0, most)) await pickLine(w, unit, line);
}

async function pickLine(
  w: WriteContext,
  unit: DemoUnit,
  line: { lineId: number; partId: number; missing: number },
): Promise<void> {
  let missing = line.missing;
  while (missing > 0) {
    const [lot] = await w.tx
      .select({ number: lots.number })
      .from(lots)
      .where(and(eq(lots.partId, line.partId), eq(lots.state, 'usable'), gt(lots.onHand, 0)))
      .orderBy(asc(lots.receivedAt), asc(lots.id))
      .limit(1);
    invariant(lot !== undefined, `the stores have part ${line.partId}`);
    const picked = await pickForUnit({ serial: unit.serial, lot: lot.number, lineId: line.lineId }, w);
    missing -= picked.quantity;
  }
}

/** What was found wrong with a unit that failed, and what was done. */
export interface Remedy {
  /** What was behind it. */
  cause: string;
  text: string;
  minutes: number;
  /** The build step that was done again. */
  stepAgain?: string;
  /** The place whose part was replaced. */
  place?: string;
}

/** Mends a unit in rework and ends the rework. */
export function remedyScene(unit: DemoUnit, remedy: Remedy, at: Date, cast: Cast): Scene {
  return {
    at,
    actor: cast.builder,
    play: async (w) => {
      if (remedy.place !== undefined) await replacePart(w, unit, remedy.place);
      if (remedy.stepAgain !== undefined) await tick(w, unit, remedy.stepAgain, undefined, remedy.minutes);
      await closeRework(
        {
          serial: unit.serial,
          foundCause: remedy.cause,
          remedy: remedy.text,
          minutes: remedy.minutes,
        },
        w,
      );
    },
  };
}

async function replacePart(w: WriteContext, unit: DemoUnit, place: string): Promise<void> {
  const [row] = await w.tx.select().from(units).where(eq(units.serial, unit.serial));
  invariant(row !== undefined, `${unit.serial} is there`);
  const line = (await readKit(w.tx, row)).find(({ designators }) => designators.includes(place));
  const old = line?.picks.find(({ designators }) => designators.includes(place));
  invariant(line !== undefined && old !== undefined, `${unit.serial} has ${place}`);
  await undoPick({ serial: unit.serial, pickId: old.id, reason: `${place} of ${unit.serial} was faulty` }, w);
  await pickLine(w, unit, { ...line, missing: old.quantity });
}
