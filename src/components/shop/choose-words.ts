const WORDS = ['none', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine'];

const inWords = (n: number) => WORDS[n] ?? String(n);

/** What a group asks for, after its label: `choose three`. Nothing where any choice will do. */
export function chooseWords({
  min,
  max,
  options,
}: {
  min: number;
  max: number;
  options: readonly unknown[];
}): string | null {
  if (min === 0 && max >= options.length) return null;
  if (min === max) return `choose ${inWords(min)}`;
  if (min === 0) return max === 1 ? null : `choose up to ${inWords(max)}`;
  return `choose ${inWords(min)} to ${inWords(max)}`;
}
