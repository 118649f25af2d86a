import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '~/components/ui/Button';
import { Notice } from '~/components/ui/Notice';
import { TextArea } from '~/components/ui/TextArea';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { isLegal, pointLabel } from '~/domain/bench/judge-run';
import { paths } from '~/lib/paths';
import type { Station } from '~/schemas/bench-station';
import { AskDialog } from './AskDialog';
import type { Point } from './run-sheet';
import { Refused, send } from './send';

interface Props {
  station: Station;
  point: Point;
  judgement: PointJudgement;
  isOwner: boolean;
  onChanged: () => void;
}

/** Whether a missed point may be let go, and the reason where it is. */
export function Concession({ station, point, judgement, isOwner, onChanged }: Props) {
  const { run, sheet, kept } = station;
  const isOpen = run.state === 'open';
  const [isAsking, setIsAsking] = useState(false);
  const [reason, setReason] = useState('');
  const change = useMutation({
    mutationFn: ({ url, body }: { url: string; body?: unknown }) => send(url, body, crypto.randomUUID()),
    onSettled: onChanged,
  });
  const granted = isOpen
    ? sheet.concessions.find(({ testPointId }) => testPointId === point.id)?.reason
    : kept.find(({ testPointId }) => testPointId === point.id)?.concession;
  const isMissed = judgement.verdict === 'fail' || judgement.verdict === 'too_close';
  if (typeof granted !== 'string' && !(isOpen && isMissed)) return null;

  const leave = (): void => {
    setIsAsking(false);
    setReason('');
    change.reset();
  };
  return (
    <section className="sheet grid gap-2" aria-labelledby="concession">
      <h2 id="concession">Concession</h2>
      {typeof granted === 'string' ? (
        <>
          <p>{isOpen ? 'The owner lets this point go:' : 'Let go by the owner:'}</p>
          <p className="border-l-4 border-lamp bg-lamp-wash px-3 py-2 break-words">{granted}</p>
          {isOpen && isOwner && (
            <p>
              <Button
                kind="outlined"
                type="button"
                busy={change.isPending}
                onClick={() => change.mutate({ url: paths.api.concessionWithdrawal(run.id, point.id) })}
              >
                Withdraw the concession
              </Button>
            </p>
          )}
          {change.error !== null && <Notice tone="stop" title={change.error.message} />}
        </>
      ) : isLegal(point) ? (
        <p className="quiet">
          This limit on emissions is the law’s: nobody can let it go. Mend the unit, or measure better.
        </p>
      ) : isOwner ? (
        <p>
          <Button kind="outlined" type="button" onClick={() => setIsAsking(true)}>
            Let it go by concession
          </Button>
        </p>
      ) : (
        <p className="quiet">This limit is the works’ own: the owner can let it go, with a reason.</p>
      )}
      {isAsking && (
        <AskDialog
          title={`Let ${pointLabel(point)} go?`}
          action="Let it go by concession"
          busy={change.isPending}
          onAct={() =>
            change.mutate(
              { url: paths.api.concessions(run.id), body: { testPointId: point.id, reason } },
              { onSuccess: leave },
            )
          }
          onLeave={leave}
        >
          <TextArea
            name="reason"
            label="Reason"
            hint="The buyer reads it on the certificate."
            maxLength={500}
            required
            autoFocus
            value={reason}
            error={refusalOf(change.error)}
            onChange={(event) => setReason(event.currentTarget.value)}
          />
        </AskDialog>
      )}
    </section>
  );
}

function refusalOf(error: Error | null): string | undefined {
  if (error instanceof Refused) return error.refusal.fields['reason'] ?? error.message;
  return error?.message;
}
