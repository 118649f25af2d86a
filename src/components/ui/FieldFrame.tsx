import type { ReactNode } from 'react';

interface Props {
  controlId: string;
  label: string;
  hint?: string | undefined;
  hintId: string;
  error?: string | undefined;
  errorId: string;
  children: ReactNode;
}

/** Label, control, hint and error in the order in which they are read. */
export function FieldFrame({ controlId, label, hint, hintId, error, errorId, children }: Props) {
  return (
    <div className="field">
      <label className="field-label" htmlFor={controlId}>
        {label}
      </label>
      {children}
      {hint && (
        <p className="quiet" id={hintId}>
          {hint}
        </p>
      )}
      {error && (
        <p className="field-error" id={errorId}>
          {error}
        </p>
      )}
    </div>
  );
}
