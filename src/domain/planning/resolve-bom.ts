import { choicesOf, groupsThatMatter } from './choices';
import type { Condition } from './condition';
import { evaluateCondition, keysOf, parseCondition } from './condition';
import type { OptionGroup } from './configuration';
import { checkConfiguration } from './configuration';

export interface BomLine {
  id: number;
  lineNo: number;
  partId: number;
  /** For one unit, in whole smallest units of the part (piece, mm, mg). */
  quantity: number;
  /** The places on the board that the line fills; empty for what has no place (a screw, wire). */
  designators: string[];
  /** A condition over option keys; null where the line is in every unit. */
  condition: string | null;
  scrapPercent: number;
}

export interface ResolvedLine {
  lineId: number;
  lineNo: number;
  partId: number;
  quantity: number;
  designators: string[];
}

/**
 * The lines of one unit for a choice of options, in order of line number. Refused, with a sentence for each fault,
 * where a condition cannot be read or a place would be filled twice.
 */
export function resolveBom(
  lines: readonly BomLine[],
  chosen: ReadonlySet<string>,
): { ok: true; lines: ResolvedLine[] } | { ok: false; reasons: string[] } {
  const read = readConditions(lines);
  return read.ok ? resolveRead(read.lines, chosen) : read;
}

/** How many combinations are tried before a check is called incomplete. */
const MAX_COMBINATIONS = 20_000;

/**
 * Checks a bill of materials for release: every condition can be read and names only options of the model, and no
 * allowed combination of options fills a place twice or leaves one of `requiredPlaces` empty.
 *
 * Combinations are simply enumerated, over those option groups that the conditions depend on. Past 20,000 of them the
 * check stops and says `complete: false`: nothing wrong was found in those tried, and the rest is unknown.
 */
export function checkBom(
  lines: readonly BomLine[],
  groups: readonly OptionGroup[],
  requiredPlaces: readonly string[] = [],
): { ok: true; combinations: number; complete: boolean } | { ok: false; reasons: string[] } {
  const read = readConditions(lines);
  if (!read.ok) return read;

  const known = new Set(groups.flatMap((group) => group.options.map((option) => option.key)));
  const used = new Set<string>();
  const unknown: string[] = [];
  for (const { line, condition } of read.lines) {
    for (const key of condition ? keysOf(condition) : []) {
      used.add(key);
      if (!known.has(key)) unknown.push(`Line ${line.lineNo}: the model has no option “${key}”.`);
    }
  }
  if (unknown.length > 0) return { ok: false, reasons: unknown };

  const relevant = groupsThatMatter(groups, used);
  let combinations = 0;
  let tried = 0;
  const reasons = new Set<string>();
  for (const chosen of choicesOf(relevant)) {
    tried += 1;
    if (tried > MAX_COMBINATIONS) return outcome(reasons, combinations, false);
    if (!checkConfiguration(relevant, chosen).ok) continue;
    combinations += 1;
    for (const reason of faultsWith(read.lines, chosen, requiredPlaces)) reasons.add(reason);
  }
  if (combinations === 0) return { ok: false, reasons: ['The option rules allow no combination at all.'] };
  return outcome(reasons, combinations, true);
}

interface ReadLine {
  line: BomLine;
  condition: Condition | null;
}

function readConditions(
  lines: readonly BomLine[],
): { ok: true; lines: ReadLine[] } | { ok: false; reasons: string[] } {
  const read: ReadLine[] = [];
  const reasons: string[] = [];
  for (const line of [...lines].sort((a, b) => a.lineNo - b.lineNo)) {
    const parsed = line.condition === null ? null : parseCondition(line.condition);
    if (parsed === null) read.push({ line, condition: null });
    else if (parsed.ok) read.push({ line, condition: parsed.ast });
    else reasons.push(`Line ${line.lineNo}, condition “${line.condition}”: ${parsed.reason}`);
  }
  return reasons.length === 0 ? { ok: true, lines: read } : { ok: false, reasons };
}

function resolveRead(
  lines: readonly ReadLine[],
  chosen: ReadonlySet<string>,
): { ok: true; lines: ResolvedLine[] } | { ok: false; reasons: string[] } {
  const resolved: ResolvedLine[] = [];
  const filledBy = new Map<string, number>();
  const reasons: string[] = [];
  for (const { line, condition } of lines) {
    if (condition && !evaluateCondition(condition, chosen)) continue;
    for (const place of line.designators) {
      const other = filledBy.get(place);
      if (other === undefined) filledBy.set(place, line.lineNo);
      else reasons.push(`${place} is filled twice, by line ${other} and line ${line.lineNo}.`);
    }
    resolved.push({
      lineId: line.id,
      lineNo: line.lineNo,
      partId: line.partId,
      quantity: line.quantity,
      designators: [...line.designators],
    });
  }
  return reasons.length === 0 ? { ok: true, lines: resolved } : { ok: false, reasons };
}

function faultsWith(
  lines: readonly ReadLine[],
  chosen: ReadonlySet<string>,
  requiredPlaces: readonly string[],
): string[] {
  const result = resolveRead(lines, chosen);
  const choice = chosen.size === 0 ? 'no option' : [...chosen].join(', ');
  if (!result.ok) return result.reasons.map((reason) => `With ${choice}: ${reason}`);
  const filled = new Set(result.lines.flatMap((line) => line.designators));
  return requiredPlaces
    .filter((place) => !filled.has(place))
    .map((place) => `With ${choice}: ${place} stays empty.`);
}

function outcome(reasons: ReadonlySet<string>, combinations: number, complete: boolean) {
  return reasons.size === 0
    ? { ok: true as const, combinations, complete }
    : { ok: false as const, reasons: [...reasons] };
}
