/** A field of a refused form as it was typed, or else what is kept. */
export function typedField(
  form: { values: Record<string, string | string[]> } | null,
  name: string,
  kept?: string,
): string | undefined {
  const typed = form?.values[name];
  return typeof typed === 'string' ? typed : kept;
}
