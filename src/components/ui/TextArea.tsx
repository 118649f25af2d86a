import type { TextareaHTMLAttributes } from 'react';
import { FieldFrame } from './FieldFrame';
import { wireField } from './field-wiring';

interface Props extends TextareaHTMLAttributes<HTMLTextAreaElement> {
  name: string;
  label: string;
  hint?: string | undefined;
  error?: string | undefined;
}

/** A labelled text of several lines: a reason, a remark, an address. */
export function TextArea({ name, id, label, hint, error, ...area }: Props) {
  const { control, hintId, errorId } = wireField({ name, id, hint, error });
  return (
    <FieldFrame
      controlId={control.id}
      label={label}
      hint={hint}
      hintId={hintId}
      error={error}
      errorId={errorId}
    >
      <textarea rows={3} {...area} {...control} className="input" />
    </FieldFrame>
  );
}
