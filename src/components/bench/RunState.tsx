import { Button } from '~/components/ui/Button';
import { Notice } from '~/components/ui/Notice';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { resultInWords, verdictOfResult } from '~/domain/bench/run-result';
import { runIsReleased } from '~/domain/production/run-status';
import { paths } from '~/lib/paths';
import type { Station } from '~/schemas/bench-station';

interface Props {
  station: Station;
  isOwn: boolean;
  mayTest: boolean;
  /** Makes the form for the certificate act once. */
  formKey: string;
  onTakeOver: () => void;
  takingOver: boolean;
}

/** Who has the run, how it ended, and what follows from that. */
export function RunState({ station, isOwn, mayTest, formKey, onTakeOver, takingOver }: Props) {
  const { run, certificateNumber } = station;
  if (run.state === 'closed') {
    const word = `Run ${run.runNo}: ${resultInWords(run.result).toLowerCase()}${run.stoppedEarly ? ', stopped here' : ''}`;
    return (
      <div className="mb-4 flex flex-wrap items-center gap-x-6 gap-y-2">
        <p className="text-lg">
          <VerdictMark verdict={verdictOfResult(run.result)} word={word} size="l" />
        </p>
        {certificateNumber !== null && (
          <a href={paths.worksCertificate(certificateNumber)}>Certificate {certificateNumber}</a>
        )}
        {certificateNumber === null && mayTest && run.isNewest && runIsReleased(run) && (
          <form action={paths.api.certificates()} method="post">
            <input type="hidden" name="_key" value={formKey} />
            <input type="hidden" name="runId" value={run.id} />
            <Button>Issue the certificate</Button>
          </form>
        )}
        <a href={paths.unit(station.unit.serial)}>The unit’s page</a>
      </div>
    );
  }
  if (isOwn) return null;
  return (
    <div className="mb-4">
      <Notice tone="warn" title={`${run.testerName} has this run`}>
        <p>You see it as it stands and cannot change it.</p>
        {mayTest && (
          <p className="mt-2">
            <Button kind="outlined" type="button" busy={takingOver} onClick={onTakeOver}>
              Take over
            </Button>
          </p>
        )}
      </Notice>
    </div>
  );
}
