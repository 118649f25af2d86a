import type { ImportedLine } from './read-bom';

// Past this many, one sentence tells more than a list of the same one.
const MANY = 12;

/** A question for each contradiction among the lines: quantity against designators, and places named twice. */
export function questionsAbout(lines: readonly ImportedLine[]): string[] {
  return [...lines.flatMap(quantityQuestion), ...repeatedPlaces(lines)];
}

function quantityQuestion({ fileLine, designators, quantity }: ImportedLine): string[] {
  const named = designators.length;
  if (named === 0 || named === quantity) return [];
  const names = named <= 6 ? designators.join(', ') : `${designators.slice(0, 6).join(', ')}, …`;
  const count = named === 1 ? 'one designator' : `${named} designators`;
  return [
    `Line ${fileLine}: the quantity is ${quantity}, but ${count} (${names}) ${named === 1 ? 'is' : 'are'} named. Which is right?`,
  ];
}

function repeatedPlaces(lines: readonly ImportedLine[]): string[] {
  const seen = new Map<string, ImportedLine>();
  const repeated: { place: string; sentence: string }[] = [];
  for (const line of lines) {
    for (const place of line.designators) {
      const other = seen.get(place);
      if (!other) {
        seen.set(place, line);
        continue;
      }
      const sentence =
        other === line
          ? `${place} is named twice on line ${line.fileLine}. Is another one meant?`
          : `${place} is named on line ${other.fileLine}${inBrackets(other)} and on line ${line.fileLine}${inBrackets(line)}. Which is right?`;
      repeated.push({ place, sentence });
    }
  }
  if (repeated.length <= MANY) return repeated.map(({ sentence }) => sentence);
  const some = repeated.slice(0, 5).map(({ place }) => place);
  return [
    `${repeated.length} designators are named more than once (${some.join(', ')}, …). Does the file hold the same parts twice?`,
  ];
}

function inBrackets({ value }: ImportedLine): string {
  return value === '' ? '' : ` (${value})`;
}
