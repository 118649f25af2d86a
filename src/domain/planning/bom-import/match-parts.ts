import { prefixOf } from './designators';
import type { ImportedLine } from './read-bom';
import { parseValue } from './values';

/** A part of the books, as far as a line of a file can name it. */
export interface KnownPart {
  number: string;
  value: string;
  footprint: string;
}

/** Lines of a file that are one part: a line of the BOM to be. */
export interface PartLine {
  /** Of its first row. */
  fileLine: number;
  designators: string[];
  quantity: number;
  value: string;
  footprint: string;
  description: string;
  partNumber: string;
  match: { number: string; by: 'number' | 'value' } | null;
  /** A number under which the part could be entered, where none was matched. */
  proposal: string;
}

/** The lines that are put in, rows of the same part drawn together, each with the part of the books that it names. */
export function matchParts(lines: readonly ImportedLine[], parts: readonly KnownPart[]): PartLine[] {
  const merged = new Map<string, PartLine>();
  for (const line of lines.filter(({ dnp }) => !dnp)) {
    const { value, footprint, description, partNumber } = line;
    const kind = prefixOf(line.designators[0] ?? '');
    const key = JSON.stringify([kind, value, footprint, partNumber, kind === '' ? description : '']);
    const known = merged.get(key);
    if (known) {
      known.designators.push(...line.designators);
      known.quantity += line.quantity;
      continue;
    }
    merged.set(key, {
      ...{ fileLine: line.fileLine, designators: [...line.designators], quantity: line.quantity },
      ...{ value, footprint, description, partNumber },
      match: matchOf(line, parts),
      proposal: proposalFor(line),
    });
  }
  return withDistinctProposals([...merged.values()], new Set(parts.map(({ number }) => number)));
}

/** By its number; else by its value and footprint, where exactly one part of the books has them. */
function matchOf(line: ImportedLine, parts: readonly KnownPart[]): PartLine['match'] {
  const same = (a: string, b: string) => a !== '' && a.toUpperCase() === b.toUpperCase();
  const named = parts.find(({ number }) => same(line.partNumber, number) || same(line.value, number));
  if (named) return { number: named.number, by: 'number' };
  const kind = prefixOf(line.designators[0] ?? '');
  const fits = parts.filter(
    (part) => sameValue(line, part, kind) && sameFootprint(line.footprint, part.footprint),
  );
  const [only, another] = fits;
  return only && !another ? { number: only.number, by: 'value' } : null;
}

/** 4k7, 4.7k and 4700 are one value; what is no value is compared as it is written. */
function sameValue(line: ImportedLine, part: KnownPart, kind: string): boolean {
  if (part.value === '' || line.value === '') return false;
  const measure = parseValue(part.value, kind);
  if (!line.measure || !measure.ok) return part.value.toUpperCase() === line.value.toUpperCase();
  return (
    measure.value === line.measure.value &&
    measure.unit === line.measure.unit &&
    (line.measure.rest === '' || measure.rest === line.measure.rest)
  );
}

/** `R_0805_2012Metric` and `0805` are one footprint; a part without one fits any. */
function sameFootprint(ofLine: string, ofPart: string): boolean {
  if (ofLine === '' || ofPart === '') return true;
  const [a, b] = [ofLine.toUpperCase(), ofPart.toUpperCase()];
  return a.includes(b) || b.includes(a);
}

function proposalFor(line: ImportedLine): string {
  if (line.partNumber !== '') return asNumber(line.partNumber);
  const size = /(?<!\d)(0201|0402|0603|0805|1206|1210|2512)(?!\d)/.exec(line.footprint)?.[1];
  const kind = prefixOf(line.designators[0] ?? '');
  const parts = [kind, size, line.value || line.description || line.footprint].filter((text) => text);
  return asNumber(parts.join('-')) || `LINE-${line.fileLine}`;
}

/** As part numbers are written: capitals, digits and a few signs. */
function asNumber(text: string): string {
  return text
    .normalize('NFKD')
    .replace(/[µμ]/gu, 'u')
    .replace(/[Ωω]/gu, 'R')
    .toUpperCase()
    .replace(/[^A-Z0-9._/+-]+/g, '-')
    .replace(/^[^A-Z0-9]+|-+$/g, '')
    .slice(0, 36);
}

function withDistinctProposals(lines: PartLine[], taken: Set<string>): PartLine[] {
  for (const line of lines) {
    if (line.match) continue;
    const bare = line.proposal;
    for (let n = 2; taken.has(line.proposal); n += 1) line.proposal = `${bare}-${n}`;
    taken.add(line.proposal);
  }
  return lines;
}
