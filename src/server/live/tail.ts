import { setTimeout as pause } from 'node:timers/promises';
import { asc, eq, gt, max } from 'drizzle-orm';
import type { Reader } from '~/server/db/client';
import { ledgerEntries, ledgerSubjects } from '~/server/db/schema';

/** One entry of the ledger of changes, as listeners hear of it: no details, no people. */
export interface Change {
  id: number;
  action: string;
  subjects: { type: string; id: number }[];
}

export interface Tail {
  /**
   * Hears of every change that is committed after `started`, until `stop` is called. What was committed
   * before is to be asked of the database after `started`; nothing falls between the two.
   */
  listen: (hear: (change: Change) => void) => { started: Promise<void>; stop: () => void };
  /** Whether the database is being asked at present. */
  isRunning: () => boolean;
}

interface Options {
  reader: () => Reader;
  everyMs: number;
  /** The longest time between the drawing of an entry's id and the commit of its transaction. */
  rereadMs: number;
  onError: (error: unknown) => void;
}

/** How many ids the first look goes back, for entries that were drawn before it and commit after it. */
const firstRereadIds = 500;

/**
 * Follows the ledger of changes while anybody listens, and asks the database nothing while nobody does.
 *
 * Ids are drawn before they are committed, so an entry may show up after one with a higher id. Each look
 * therefore starts at the highest id that was seen `rereadMs` ago: an entry that is still open then gets
 * a higher one.
 */
export function tailLedger({ reader, everyMs, rereadMs, onError }: Options): Tail {
  const listeners = new Set<(change: Change) => void>();
  let run: { controller: AbortController; started: Promise<void> } | undefined;

  async function follow(signal: AbortSignal, started: () => void): Promise<void> {
    const looks: { at: number; highest: number }[] = [];
    let known: Set<number> | undefined;
    const isOver = () => signal.aborted;
    while (!isOver()) {
      try {
        const at = performance.now();
        if (looks.length === 0) looks.push({ at, highest: await firstFloor(reader()) });
        while (looks[1] !== undefined && looks[1].at <= at - rereadMs) looks.shift();
        const changes = await readChanges(reader(), looks[0]?.highest ?? 0);
        const earlier = known;
        known = new Set(changes.map(({ id }) => id));
        const highest = changes.at(-1)?.id;
        if (highest !== undefined) looks.push({ at, highest });
        if (earlier === undefined) started();
        else if (!isOver()) for (const change of changes) if (!earlier.has(change.id)) tell(change);
      } catch (error) {
        onError(error);
      }
      await pause(everyMs, undefined, { signal }).catch(() => undefined);
    }
  }

  function tell(change: Change): void {
    for (const hear of [...listeners]) {
      try {
        hear(change);
      } catch (error) {
        onError(error);
      }
    }
  }

  function start() {
    const controller = new AbortController();
    const started = new Promise<void>((resolve) => void follow(controller.signal, resolve));
    return { controller, started };
  }

  return {
    isRunning: () => run !== undefined,
    listen(hear) {
      listeners.add(hear);
      run ??= start();
      return {
        started: run.started,
        stop() {
          if (!listeners.delete(hear) || listeners.size > 0) return;
          run?.controller.abort();
          run = undefined;
        },
      };
    },
  };
}

async function firstFloor(reader: Reader): Promise<number> {
  const [row] = await reader.select({ id: max(ledgerEntries.id) }).from(ledgerEntries);
  return Math.max(0, (row?.id ?? 0) - firstRereadIds);
}

async function readChanges(reader: Reader, afterId: number): Promise<Change[]> {
  const rows = await reader
    .select({
      id: ledgerEntries.id,
      action: ledgerEntries.action,
      type: ledgerSubjects.subjectType,
      subjectId: ledgerSubjects.subjectId,
    })
    .from(ledgerEntries)
    .leftJoin(ledgerSubjects, eq(ledgerSubjects.ledgerEntryId, ledgerEntries.id))
    .where(gt(ledgerEntries.id, afterId))
    .orderBy(asc(ledgerEntries.id));
  const changes = new Map<number, Change>();
  for (const { id, action, type, subjectId } of rows) {
    const change = changes.get(id) ?? { id, action, subjects: [] };
    if (type !== null && subjectId !== null) change.subjects.push({ type, id: subjectId });
    changes.set(id, change);
  }
  return [...changes.values()];
}
