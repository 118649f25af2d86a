/** Whether an entry is a number alone, without a unit: `612`, `−51,2`, `1e-3`. */
export function isBareNumber(text: string): boolean {
  return /^[\s+\-\u2212\u2013\d.,']*(?:e[+\-\u2212]?\d+)?\s*$/iu.test(text);
}
