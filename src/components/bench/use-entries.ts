import { useMutation, useMutationState } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { z } from 'zod';
import { paths } from '~/lib/paths';
import { loadEntries, saveEntries } from './kept-entries';
import type { KeptEntry } from './kept-entries';
import type { Entry } from './run-sheet';
import { Refused, send } from './send';

const takenSchema = z.object({ version: z.number() });
const longestWaitMs = 15_000;

/** The entries that the server may not have yet, and how they get there. */
export interface Entries {
  kept: KeptEntry[];
  /** The server has not answered for a while; it is tried again. */
  isStuck: boolean;
  add: (entry: Entry) => void;
  /** Takes away what the server refused. */
  dismiss: (testPointId: number) => void;
}

/**
 * Keeps each entry in the browser until the server has it, and sends them one by one in the order in which they
 * were made; after a reload they are sent again under the same key.
 *
 * @param onTaken called when the server has taken one, or refused it
 */
export function useEntries(runId: number, onTaken: () => Promise<unknown>): Entries {
  const [kept, setKept] = useState<KeptEntry[]>([]);
  // What is sent is looked up when its turn comes: an entry before it may have changed its version.
  const newest = useRef(kept);
  const change = (to: (before: KeptEntry[]) => KeptEntry[]): void => {
    newest.current = to(newest.current);
    saveEntries(runId, newest.current);
    setKept(newest.current);
  };

  const mutation = useMutation({
    mutationKey: ['entry', runId],
    scope: { id: `run-${runId}` },
    networkMode: 'always',
    retry: (_, error) => !(error instanceof Refused),
    retryDelay: (failures) => Math.min(1000 * 2 ** failures, longestWaitMs),
    mutationFn: async (key: string) => {
      const found = newest.current.find((one) => one.key === key);
      return found === undefined ? null : send(paths.api.readings(runId), found.entry, key);
    },
    onSuccess: async (answer, key) => {
      await onTaken();
      const taken = takenSchema.safeParse(answer);
      change((before) =>
        before
          .filter((one) => one.key !== key)
          .map((one) =>
            one.after === key && taken.success
              ? { ...one, after: undefined, entry: { ...one.entry, version: taken.data.version } }
              : one,
          ),
      );
    },
    onError: async (error, key) => {
      change((before) => before.map((one) => (one.key === key ? { ...one, refused: error.message } : one)));
      await onTaken();
    },
  });
  const { mutate } = mutation;

  const failures = useMutationState({
    filters: { mutationKey: ['entry', runId], status: 'pending' },
    select: ({ state }) => state.failureCount,
  });

  useEffect(() => {
    const found = loadEntries(runId);
    newest.current = found;
    setKept(found);
    for (const one of found) if (one.refused === undefined) mutate(one.key);
  }, [runId, mutate]);

  return {
    kept,
    isStuck: failures.some((count) => count > 0),
    add: (entry) => {
      const key = crypto.randomUUID();
      const before = newest.current.filter(
        (one) => one.refused === undefined || one.entry.testPointId !== entry.testPointId,
      );
      const after = before.findLast((one) => one.entry.testPointId === entry.testPointId)?.key;
      change(() => [...before, { key, entry, after }]);
      mutate(key);
    },
    dismiss: (testPointId) =>
      change((before) =>
        before.filter((one) => one.refused === undefined || one.entry.testPointId !== testPointId),
      ),
  };
}
