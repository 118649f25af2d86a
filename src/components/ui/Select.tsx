import type { SelectHTMLAttributes } from 'react';
import { FieldFrame } from './FieldFrame';
import { wireField } from './field-wiring';

interface Props extends Omit<SelectHTMLAttributes<HTMLSelectElement>, 'children'> {
  name: string;
  label: string;
  options: readonly { value: string; label: string; disabled?: boolean | undefined }[];
  /** First, empty choice, where nothing is chosen yet. */
  placeholder?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
}

/** A labelled choice of one from a list. */
export function Select({ name, id, label, options, placeholder, hint, error, ...select }: Props) {
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
      <select {...select} {...control} className="input">
        {placeholder !== undefined && <option value="">{placeholder}</option>}
        {options.map((option) => (
          <option key={option.value} value={option.value} disabled={option.disabled}>
            {option.label}
          </option>
        ))}
      </select>
    </FieldFrame>
  );
}
