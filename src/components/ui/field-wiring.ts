interface FieldLike {
  name: string;
  /** Needed only where two forms of a page have a field of the same name. */
  id?: string | undefined;
  hint?: string | undefined;
  error?: string | undefined;
}

/** Ids and ARIA attributes that tie a control to its hint and its error. */
export function wireField({ name, id = `field-${name}`, hint, error }: FieldLike) {
  const hintId = `${id}-hint`;
  const errorId = `${id}-error`;
  const describedBy = [hint && hintId, error && errorId].filter(Boolean).join(' ');
  return {
    hintId,
    errorId,
    control: {
      id,
      name,
      'aria-describedby': describedBy === '' ? undefined : describedBy,
      'aria-invalid': error ? ('true' as const) : undefined,
    },
  };
}
