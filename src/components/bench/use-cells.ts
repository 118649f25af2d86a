import { useRef, useState } from 'react';
import { newestReading } from '~/domain/bench/run-entry';
import type { Quantity } from '~/domain/bench/quantities';
import type { Station, StationReading } from '~/schemas/bench-station';
import { columnUnitOf, isRead, readEntry, withEntry } from './run-sheet';
import type { Entry, Equipment, Point } from './run-sheet';
import type { Entries } from './use-entries';
import type { Chosen } from './use-equipment';

/** What stands in a cell and was not taken. */
export interface Unread {
  text: string;
  again: boolean;
  reason: string;
  /** Taken once the person confirms it. */
  ask: boolean;
}

interface Given {
  /** With all entries on their way. */
  station: Station;
  equipment: Equipment;
  entries: Entries;
  chosenFor: (quantity: Quantity) => Chosen;
  editable: boolean;
}

/** The cell in hand, what is typed into it, and what becomes of it on leaving. */
export function useCells({ station, equipment, entries, chosenFor, editable }: Given) {
  const { points, readings } = station.sheet;
  const [inHand, setInHand] = useState<number | undefined>((points.find(isRead) ?? points[0])?.id);
  const [draft, setDrawnDraft] = useState<string | null>(null);
  // Going on with Enter leaves the cell before what was typed is drawn again: it must be taken once.
  const newestDraft = useRef(draft);
  const setDraft = (text: string | null): void => {
    newestDraft.current = text;
    setDrawnDraft(text);
  };
  const [again, setAgain] = useState(false);
  const [unread, setUnread] = useState<ReadonlyMap<number, Unread>>(new Map());

  const forget = (pointId: number): void => {
    setUnread((before) => new Map([...before].filter(([id]) => id !== pointId)));
  };

  const entryOf = (point: Point, text: string, confirmed: boolean): Entry => ({
    testPointId: point.id,
    text: text.trim(),
    columnUnit: columnUnitOf(readings, point.quantity),
    again,
    ...chosenFor(point.quantity),
    confirmed,
    attenuationHeld: newestReading(readings, point.id)?.attenuationHeld ?? false,
    version: versionOf(newestReading(readings, point.id)),
  });

  const point = points.find(({ id }) => id === inHand);
  const typed = draft === null || draft.trim() === '' ? null : draft;
  const entry = point === undefined || typed === null ? null : entryOf(point, typed, false);
  const shown = entry === null ? station : withEntry(station, equipment, entry);

  /** Takes what is typed; `explicit` also takes an unchanged text with another instrument or path. */
  const commit = (explicit: boolean): boolean => {
    if (point === undefined || !isRead(point) || !editable) return true;
    const left = newestDraft.current;
    const typed = left === null || left.trim() === '' ? null : left;
    const newest = newestReading(readings, point.id);
    const text = (typed ?? (explicit && newest?.source === 'typed' ? textOf(newest) : '')).trim();
    const before = unread.get(point.id);
    const confirmed = before?.ask === true && before.text === text;
    const next = entryOf(point, text, explicit && confirmed);
    const isSame =
      newest !== undefined &&
      !again &&
      textOf(newest) === text &&
      newest.instrumentRevisionId === next.instrumentRevisionId &&
      newest.pathRevisionId === next.pathRevisionId;
    if (text === '' || isSame || (typed === null && !explicit)) {
      setDraft(null);
      if (!explicit || isSame) setAgain(false);
      return true;
    }
    const read = readEntry(station, equipment, point, next);
    if (!read.ok) {
      const { reason, ask } = read;
      setUnread((all) => new Map(all).set(point.id, { text, again, reason, ask }));
      return false;
    }
    forget(point.id);
    setDraft(null);
    setAgain(false);
    entries.add(next);
    return true;
  };

  return {
    inHand,
    point,
    draft,
    again,
    unread,
    shown,
    type: setDraft,
    commit,
    /** Enters a cell: what was refused in it stands there again. */
    enter: (pointId: number) => {
      const before = unread.get(pointId);
      setInHand(pointId);
      setDraft(before?.text ?? null);
      setAgain(before?.again ?? false);
    },
    restore: () => {
      if (inHand === undefined) return;
      forget(inHand);
      entries.dismiss(inHand);
      setDraft(null);
      setAgain(false);
    },
    readAgain: () => {
      setAgain(true);
      setDraft('');
    },
    holdAttenuation: (held: boolean) => {
      const newest = point === undefined ? undefined : newestReading(readings, point.id);
      if (point === undefined || newest === undefined) return;
      const { instrumentRevisionId, pathRevisionId } = newest;
      entries.add({
        ...entryOf(point, textOf(newest), true),
        ...{ instrumentRevisionId, pathRevisionId, again: false, attenuationHeld: held },
      });
    },
  };
}

export type Cells = ReturnType<typeof useCells>;

function versionOf(reading: StationReading | undefined): number {
  return reading?.version ?? 0;
}

/** What was entered, with its unit, as it is edited; `51.1` in a dBc column needs no more. */
export function textOf(reading: StationReading): string {
  const { enteredText, enteredUnit } = reading;
  if (/[a-zµ%@]/iu.test(enteredText) || enteredUnit === 'yes/no' || enteredUnit === '1') return enteredText;
  return `${enteredText} ${enteredUnit}`;
}
