/** For `z.preprocess`: what a form sends as one value, several, or none, as a list. */
export function formList(value: unknown): unknown[] {
  if (value === undefined) return [];
  return Array.isArray(value) ? value : [value];
}
