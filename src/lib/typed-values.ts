/** What a refused form held, to be shown again: the text of a field, or the fallback where nothing came back. */
export function typedIn(
  form: { values: Record<string, string | string[]> } | null,
): (name: string, fallback?: string) => string | undefined {
  return (name, fallback) => {
    const value = form?.values[name];
    return typeof value === 'string' ? value : fallback;
  };
}

/** As {@link typedIn}, for what may be chosen more than once; a form that came back without it has none chosen. */
export function typedList(
  form: { values: Record<string, string | string[]> } | null,
  name: string,
  fallback: readonly string[],
): readonly string[] {
  if (form === null) return fallback;
  const value = form.values[name] ?? [];
  return typeof value === 'string' ? [value] : value;
}

/**
 * All single fields that a refused form held; null where nothing came back.
 *
 * @param having a field by which the form is told from others of its page
 */
export function typedFields(
  form: { values: Record<string, string | string[]> } | null,
  having?: string,
): Record<string, string> | null {
  if (form === null || (having !== undefined && form.values[having] === undefined)) return null;
  return Object.fromEntries(
    Object.entries(form.values).flatMap(([name, value]) =>
      typeof value === 'string' ? [[name, value]] : [],
    ),
  );
}
