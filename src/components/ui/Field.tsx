import type { InputHTMLAttributes, ReactNode, Ref } from 'react';
import { FieldFrame } from './FieldFrame';
import { wireField } from './field-wiring';

interface Props extends Omit<InputHTMLAttributes<HTMLInputElement>, 'children'> {
  name: string;
  label: string;
  hint?: string | undefined;
  /** What is wrong and what to do, in a sentence. */
  error?: string | undefined;
  /** Monospaced face: serial numbers, lots, readings. */
  mono?: boolean | undefined;
  /** Unit that follows the value, as W or mA. */
  unit?: ReactNode;
  ref?: Ref<HTMLInputElement> | undefined;
}

/** A labelled input with its hint and its error. */
export function Field({ name, id, label, hint, error, mono = false, unit, className, ref, ...input }: Props) {
  const { control, hintId, errorId } = wireField({ name, id, hint, error });
  const box = (
    <input
      {...input}
      {...control}
      ref={ref}
      className={['input', mono && 'font-mono', className].filter(Boolean).join(' ')}
    />
  );
  return (
    <FieldFrame
      controlId={control.id}
      label={label}
      hint={hint}
      hintId={hintId}
      error={error}
      errorId={errorId}
    >
      {unit === undefined ? (
        box
      ) : (
        <span className="flex items-center gap-2">
          {box}
          <span className="shrink-0 font-mono text-ink-2">{unit}</span>
        </span>
      )}
    </FieldFrame>
  );
}
