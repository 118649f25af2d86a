import { useState } from 'react';
import { Field } from '~/components/ui/Field';
import type { StationReading } from '~/schemas/bench-station';
import { AskDialog } from './AskDialog';

interface Props {
  label: string;
  reading: StationReading;
  busy: boolean;
  error: string | undefined;
  onVoid: (reason: string) => void;
  onLeave: () => void;
}

/** Asks for the cause for which a reading does not count. */
export function VoidDialog({ label, reading, busy, error, onVoid, onLeave }: Props) {
  const [reason, setReason] = useState('');
  return (
    <AskDialog
      title={`Void “${reading.enteredText}” of ${label}?`}
      action="Void the reading"
      tone="stop"
      busy={busy}
      onAct={() => onVoid(reason)}
      onLeave={onLeave}
    >
      <Field
        name="reason"
        label="Cause"
        hint="Wrong band, lead off. It is printed on the run’s page."
        maxLength={300}
        required
        autoFocus
        value={reason}
        error={error}
        onChange={(event) => setReason(event.currentTarget.value)}
      />
    </AskDialog>
  );
}
