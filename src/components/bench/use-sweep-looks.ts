import { useRef, useState } from 'react';
import { z } from 'zod';
import { paths } from '~/lib/paths';
import { sweepLookSchema } from '~/schemas/bench-sweeps';
import type { SweepLookAnswer } from '~/schemas/bench-sweeps';
import { Refused, send } from './send';
import type { Chosen } from './use-equipment';

/** What a person says about a file, as the door's form has it; empty where the file or the program says it. */
export interface SweepFields {
  band: string;
  freqColumn: string;
  levelColumn: string;
  freqUnit: string;
  levelUnit: string;
  rbwKhz: string;
  detector: string;
  instrumentRevisionId: string;
  pathRevisionId: string;
  understood: string;
  attenuationHeld: string;
}

/** A file that is looked at and not kept yet. */
export interface PendingSweep {
  id: number;
  file: File;
  fields: SweepFields;
  /** Null while it is read for the first time, and where it is no sweep. */
  look: SweepLookAnswer | null;
  /** What is wrong, in a sentence. */
  error: string | null;
  isBusy: boolean;
}

export interface SweepLooks {
  pending: PendingSweep[];
  /** The one that is shown. */
  shown: PendingSweep | undefined;
  show: (id: number) => void;
  add: (files: readonly File[], chosen: Chosen) => void;
  /** Changes what is said about a file; it is read again where that changes what it comes to. */
  correct: (id: number, fields: Partial<SweepFields>) => void;
  leave: (id: number) => void;
  /** What was written down last; null while nothing was. */
  said: string | null;
  accept: (sweeps: readonly PendingSweep[]) => Promise<void>;
}

/** What changes nothing of what was read, and so needs no other look. */
const onlySaid: readonly (keyof SweepFields)[] = ['understood', 'attenuationHeld'];

const takenSchema = z.object({ readings: z.number() });

let lastId = 0;

function bodyOf({ file, fields }: Pick<PendingSweep, 'file' | 'fields'>): FormData {
  const body = new FormData();
  for (const [name, value] of Object.entries(fields)) body.set(name, String(value));
  body.set('file', file);
  return body;
}

function sentenceOf(error: unknown): string {
  return error instanceof Refused ? error.refusal.detail : 'The server did not answer. Try again.';
}

/** What has still to be answered before a sweep can be accepted. */
export function openQuestions({ look, fields }: PendingSweep): SweepLookAnswer['questions'] {
  return (look?.questions ?? []).filter(({ needsValue }) => needsValue || fields.understood !== 'yes');
}

/** Whether nothing stands in the way of accepting it. */
export function isAcceptable(sweep: PendingSweep): boolean {
  const { look, isBusy } = sweep;
  return (
    !isBusy &&
    look !== null &&
    look.refusal === null &&
    look.readings.length > 0 &&
    openQuestions(sweep).length === 0
  );
}

/**
 * Files that were dropped on a run: each is read by the server without anything being kept, corrected by the
 * tester, and accepted or left.
 *
 * @param onAccepted called when the server has taken one
 */
export function useSweepLooks(runId: number, onAccepted: () => Promise<unknown>): SweepLooks {
  const [pending, setPending] = useState<PendingSweep[]>([]);
  const [shownId, setShownId] = useState<number | null>(null);
  const [said, setSaid] = useState<string | null>(null);
  // The newest question about each file: an older one that is answered later no longer counts.
  const asked = useRef(new Map<number, string>());

  const change = (id: number, to: Partial<PendingSweep>): void =>
    setPending((all) => all.map((each) => (each.id === id ? { ...each, ...to } : each)));
  const leave = (id: number): void => setPending((all) => all.filter((each) => each.id !== id));

  const look = async (sweep: PendingSweep): Promise<void> => {
    const key = crypto.randomUUID();
    asked.current.set(sweep.id, key);
    const settle = (to: Partial<PendingSweep>): void => {
      if (asked.current.get(sweep.id) === key) change(sweep.id, { ...to, isBusy: false });
    };
    change(sweep.id, { fields: sweep.fields, isBusy: true, error: null });
    try {
      const answer = await send(paths.api.sweepLooks(runId), bodyOf(sweep), key);
      settle({ look: sweepLookSchema.parse(answer) });
    } catch (error) {
      settle({ look: null, error: sentenceOf(error) });
    }
  };

  return {
    pending,
    shown: pending.find(({ id }) => id === shownId) ?? pending[0],
    show: setShownId,
    said,
    add: (files, { instrumentRevisionId, pathRevisionId }) => {
      const added = files.map((file): PendingSweep => {
        lastId += 1;
        const fields: SweepFields = {
          ...{
            band: '',
            freqColumn: '',
            levelColumn: '',
            freqUnit: '',
            levelUnit: '',
            rbwKhz: '',
            detector: '',
          },
          ...{ understood: '', attenuationHeld: '' },
          instrumentRevisionId: String(instrumentRevisionId ?? ''),
          pathRevisionId: String(pathRevisionId ?? ''),
        };
        return { id: lastId, file, fields, look: null, error: null, isBusy: true };
      });
      setPending((all) => [...all, ...added]);
      setSaid(null);
      setShownId(added[0]?.id ?? null);
      void (async () => {
        for (const each of added) await look(each);
      })();
    },
    correct: (id, fields) => {
      const sweep = pending.find((each) => each.id === id);
      if (sweep === undefined) return;
      const corrected = { ...sweep, fields: { ...sweep.fields, ...fields } };
      const isOnlySaid = Object.keys(fields).every((name) => onlySaid.some((said) => said === name));
      if (isOnlySaid) change(id, { fields: corrected.fields });
      else void look(corrected);
    },
    leave,
    accept: async (sweeps) => {
      const taken: string[] = [];
      for (const sweep of sweeps) {
        change(sweep.id, { isBusy: true, error: null });
        try {
          const answer = await send(paths.api.sweeps(runId), bodyOf(sweep), crypto.randomUUID());
          taken.push(`${sweep.file.name}: ${takenSchema.parse(answer).readings} readings.`);
          leave(sweep.id);
        } catch (error) {
          change(sweep.id, { isBusy: false, error: sentenceOf(error) });
        }
      }
      await onAccepted();
      if (taken.length > 0) setSaid(taken.join(' '));
    },
  };
}
