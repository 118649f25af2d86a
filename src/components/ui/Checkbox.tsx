import type { InputHTMLAttributes, ReactNode } from 'react';
import { wireField } from './field-wiring';

interface Props extends Omit<InputHTMLAttributes<HTMLInputElement>, 'type'> {
  name: string;
  label: string;
  /** `radio` where exactly one of several with the same name is chosen. */
  type?: 'checkbox' | 'radio' | undefined;
  hint?: string | undefined;
  error?: string | undefined;
  /** At the end of the line: a price. */
  end?: ReactNode;
}

/** A box to tick, its label beside it and its hint beneath; the whole line can be pressed. */
export function Checkbox({ name, id, value, label, type = 'checkbox', hint, error, end, ...input }: Props) {
  const ownId = id ?? (value === undefined ? undefined : `field-${name}-${String(value)}`);
  const { control, hintId, errorId } = wireField({ name, id: ownId, hint, error });
  return (
    <div>
      <label className="flex min-h-(--check) items-center gap-2.5">
        <input {...input} {...control} type={type} value={value} className="check-box mt-0" />
        <span className="min-w-0 flex-1 leading-snug">{label}</span>
        {end !== undefined && <span className="font-mono">{end}</span>}
      </label>
      {hint && (
        <p className="quiet pl-[1.75rem]" id={hintId}>
          {hint}
        </p>
      )}
      {error && (
        <p className="field-error pl-[1.75rem]" id={errorId}>
          {error}
        </p>
      )}
    </div>
  );
}
