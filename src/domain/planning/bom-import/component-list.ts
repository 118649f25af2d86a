/** One row of a table, with the line of the file on which it ends. */
export interface TableRow {
  cells: string[];
  line: number;
}

interface Listing {
  line: number;
  order: string;
  parts: Map<string, { value: string; line: number }>;
}

const HEAD = /^#Cmp\s*\(\s*order\s*=\s*(\w+)\s*\)/i;

/** Whether a text is a component list: listings of `| name value` lines, each under `#Cmp ( order = … )`. */
export function isComponentList(text: string): boolean {
  return /^#Cmp\s*\(/im.test(text) && /^\|\s/m.test(text);
}

/**
 * Reads a component list, which names every part once in each of its listings (by reference, then again by value).
 * The first listing counts; the others are compared with it, and a part on which they differ is asked about.
 */
export function readComponentList(text: string): { rows: TableRow[]; notes: string[]; questions: string[] } {
  const [first, ...others] = listingsOf(text);
  if (!first) return { rows: [], notes: [], questions: [] };
  const rows = [...first.parts].map(([designator, { value, line }]) => ({
    cells: [designator, value],
    line,
  }));
  const notes: string[] = [];
  const questions: string[] = [];
  for (const other of others) {
    const differences = differencesOf(first, other);
    questions.push(...differences);
    if (differences.length === 0) {
      notes.push(
        `The same ${first.parts.size} parts are listed again from line ${other.line}, in order of ${other.order}; they were counted once.`,
      );
    }
  }
  return { rows: [{ cells: ['Reference', 'Value'], line: first.line }, ...rows], notes, questions };
}

function listingsOf(text: string): Listing[] {
  const listings: Listing[] = [];
  text.split(/\r\n|\r|\n/).forEach((content, index) => {
    const head = HEAD.exec(content);
    if (head) listings.push({ line: index + 1, order: (head[1] ?? '').toLowerCase(), parts: new Map() });
    const current = listings.at(-1);
    if (!current || !content.startsWith('|')) return;
    const entry = content.slice(1).trim();
    // By value, the value (which may have spaces) stands first and the designator last.
    const match = current.order === 'value' ? /^(.*?)\s*(\S+)$/.exec(entry) : /^(\S+)\s*(.*)$/.exec(entry);
    const [designator, value] =
      current.order === 'value' ? [match?.[2], match?.[1]] : [match?.[1], match?.[2]];
    if (designator) current.parts.set(designator, { value: value ?? '', line: index + 1 });
  });
  return listings;
}

function differencesOf(first: Listing, other: Listing): string[] {
  const questions: string[] = [];
  for (const [designator, { value, line }] of first.parts) {
    const again = other.parts.get(designator);
    if (!again) {
      questions.push(
        `${designator} is on line ${line}, but not in the listing that begins on line ${other.line}. Is it in the rig?`,
      );
    } else if (again.value !== value) {
      questions.push(
        `${designator} is ${value} on line ${line} and ${again.value} on line ${again.line}. Which is right?`,
      );
    }
  }
  for (const [designator, { line }] of other.parts) {
    if (!first.parts.has(designator)) {
      questions.push(
        `${designator} is on line ${line}, but not in the listing that begins on line ${first.line}. Is it in the rig?`,
      );
    }
  }
  return questions;
}
