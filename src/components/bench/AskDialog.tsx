import { useEffect, useRef } from 'react';
import type { ReactNode } from 'react';
import { Button } from '~/components/ui/Button';

interface Props {
  title: string;
  children: ReactNode;
  /** What is done, as its button says it; a dialog without it only tells. */
  action?: string | undefined;
  tone?: 'stop' | undefined;
  busy?: boolean | undefined;
  onAct?: (() => void) | undefined;
  onLeave: () => void;
  /** What its leaving button says. */
  leaveText?: string | undefined;
}

/** Asks before something that cannot be undone. Escape leaves it. */
export function AskDialog({ title, children, action, tone, busy, onAct, onLeave, leaveText }: Props) {
  const dialog = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    const element = dialog.current;
    element?.showModal();
    return () => element?.close();
  }, []);
  return (
    <dialog ref={dialog} aria-labelledby="ask-title" className="w-[min(34rem,92vw)] p-5" onCancel={onLeave}>
      <form
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          onAct?.();
        }}
      >
        <h2 id="ask-title">{title}</h2>
        {children}
        <p className="flex flex-wrap gap-3">
          {action !== undefined && (
            <Button tone={tone} busy={busy}>
              {action}
            </Button>
          )}
          <Button kind="outlined" type="button" onClick={onLeave}>
            {leaveText ?? (action === undefined ? 'Close this list' : 'Leave it')}
          </Button>
        </p>
      </form>
    </dialog>
  );
}
